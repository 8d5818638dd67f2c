import type { Knex } from 'knex';
import type { Member as MemberView, PendingInvitation } from '#contract/deposits.ts';
import type { Role } from '#contract/roles.ts';
import { transact } from '#server/db/transact.ts';
import type { Actor } from '#server/lib/actor.ts';
import { AppError, orNotFound } from '#server/lib/errors.ts';
import type { Log } from '#server/lib/log.ts';
import type { InvitationsService } from '../auth/invitations.service.ts';
import { activeLeads, type MembershipRow } from '../deposits/deposits.repository.ts';
import type { RecordService } from '../record/record.service.ts';

export interface MembersDeps {
  db: Knex;
  log: Log;
  record: RecordService;
  invitations: InvitationsService;
}

export interface MembersService {
  list(depositId: number): Promise<{ members: MemberView[]; invitations: PendingInvitation[] }>;
  /** @throws {AppError} 409 for the last lead. */
  changeRole(depositId: number, userId: number, role: Role, actor: Actor): Promise<MemberView>;
  /** Takes their membership and their API tokens. @throws {AppError} 409 for the last lead. */
  remove(depositId: number, userId: number, actor: Actor): Promise<void>;
}

export function createMembers({ db, log, record, invitations }: MembersDeps): MembersService {
  const membersOf = (trx: Knex, depositId: number) =>
    trx('memberships')
      .join('users', 'users.id', 'memberships.user_id')
      .where({ deposit_id: depositId })
      .orderBy('users.name')
      .select<MemberView[]>(
        'users.id as userId',
        'users.name',
        'users.email',
        'memberships.role',
        'memberships.since',
      );

  const memberOf = async (trx: Knex, depositId: number, userId: number): Promise<MemberView> => {
    const [member] = await membersOf(trx, depositId).where({ user_id: userId });
    return orNotFound(member, 'member');
  };

  /** Somebody active must remain who can sign and let people in. */
  async function refuseLastLead(trx: Knex, depositId: number, member: MemberView): Promise<void> {
    if (member.role !== 'lead') return;
    const leads = await activeLeads(trx, depositId);
    if (leads.some((lead) => lead.id !== member.userId)) return;
    throw new AppError(
      409,
      'last-lead',
      `${member.name} is the only lead of this deposit: make somebody else lead first.`,
    );
  }

  return {
    list: async (depositId) => ({
      members: await membersOf(db, depositId),
      invitations: await invitations.listOf(depositId),
    }),

    async changeRole(depositId, userId, role, actor) {
      const changed = await transact(db, async (trx) => {
        const before = await memberOf(trx, depositId, userId);
        if (role !== 'lead') await refuseLastLead(trx, depositId, before);
        await trx<MembershipRow>('memberships')
          .where({ deposit_id: depositId, user_id: userId })
          .update({ role });
        await record.add(trx, {
          actor,
          depositId,
          action: 'member.role-changed',
          subject: `person ${userId}`,
          sentence: `${actor.name} made ${before.name} ${role}; before: ${before.role}.`,
        });
        return { ...before, role };
      });
      log.info(
        { event: 'role.changed', userId: actor.id, depositId, memberId: userId, role },
        'role changed',
      );
      return changed;
    },

    async remove(depositId, userId, actor) {
      await transact(db, async (trx) => {
        const before = await memberOf(trx, depositId, userId);
        await refuseLastLead(trx, depositId, before);
        await trx('api_tokens').where({ deposit_id: depositId, user_id: userId }).delete();
        await trx<MembershipRow>('memberships')
          .where({ deposit_id: depositId, user_id: userId })
          .delete();
        await record.add(trx, {
          actor,
          depositId,
          action: 'member.removed',
          subject: `person ${userId}`,
          sentence: `${actor.name} removed ${before.name}, ${before.role}.`,
        });
      });
      log.info(
        { event: 'member.removed', userId: actor.id, depositId, memberId: userId },
        'member removed',
      );
    },
  };
}
