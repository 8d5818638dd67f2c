import type { Knex } from 'knex';
import type { InvitationView } from '#contract/auth.ts';
import type { PendingInvitation } from '#contract/deposits.ts';
import type { Role } from '#contract/roles.ts';
import { transact } from '#server/db/transact.ts';
import type { Actor, Person } from '#server/lib/actor.ts';
import { AppError, notFound } from '#server/lib/errors.ts';
import { sha256Hex } from '#server/lib/secrets.ts';
import {
  type InvitationRow,
  type OpenInvitation,
  openInvitations,
  openInvitationsWithNames,
} from './invitations.repository.ts';
import { createSendInvitation, type InvitationsDeps } from './send-invitation.ts';
import { userByEmail, type UserRow } from './users.repository.ts';

export interface InvitationsService {
  /** Invites to a deposit with a role. @throws {AppError} 409 for a member or an open invitation. */
  toDeposit(
    deposit: { id: number; role: Role },
    email: string,
    actor: Actor,
  ): Promise<PendingInvitation>;
  toInstance(email: string, actor: Actor): Promise<void>;
  listOf(depositId: number): Promise<PendingInvitation[]>;
  withdraw(depositId: number, invitationId: number, actor: Actor): Promise<void>;
  /** @throws {AppError} 404 when the link is not valid. */
  byLink(token: string): Promise<OpenInvitation>;
  view(token: string): Promise<InvitationView>;
  /** Uses the link within the transaction that makes its account and membership. @throws {AppError} 404 when it was used meanwhile. */
  use(trx: Knex.Transaction, invitation: OpenInvitation, person: Person): Promise<void>;
}

export const noSuchInvitation = (): AppError =>
  new AppError(
    404,
    'no-such-link',
    'This invitation does not work: it was used, withdrawn, or is older than 7 days. Ask for a new one.',
  );

export function createInvitations(deps: InvitationsDeps): InvitationsService {
  const { db, clock, record } = deps;
  const open = (trx: Knex) => openInvitations(trx, clock);
  const openWithNames = () => openInvitationsWithNames(db, clock);
  const send = createSendInvitation(deps);

  const asPending = (row: OpenInvitation): PendingInvitation => {
    if (row.role === null) throw new Error(`invitation ${row.id} to a deposit has no role`);
    return {
      id: row.id,
      email: row.email,
      role: row.role,
      invitedBy: row.inviter,
      sentAt: row.created_at,
      expiresAt: row.expires_at,
    };
  };

  async function byLink(token: string): Promise<OpenInvitation> {
    const row = await openWithNames()
      .where({ token_hash: sha256Hex(token) })
      .first();
    if (!row) throw noSuchInvitation();
    return row;
  }

  return {
    async toDeposit(deposit, email, actor) {
      const member = await db<UserRow>('users')
        .where({ email })
        .whereIn('id', db('memberships').where({ deposit_id: deposit.id }).select('user_id'))
        .first();
      if (member)
        throw new AppError(
          409,
          'already-member',
          `${email} is a member of this deposit already: change the role instead.`,
        );
      return asPending(await send(deposit, email, actor));
    },
    async toInstance(email, actor) {
      await send(null, email, actor);
    },
    async listOf(depositId) {
      return (await openWithNames().where({ deposit_id: depositId }).orderBy('invitations.id')).map(
        asPending,
      );
    },
    async withdraw(depositId, invitationId, actor) {
      await transact(db, async (trx) => {
        const row = await open(trx).where({ id: invitationId, deposit_id: depositId }).first();
        if (!row) throw notFound('invitation');
        await trx<InvitationRow>('invitations')
          .where({ id: row.id })
          .update({ withdrawn_at: clock().toISOString() });
        await record.add(trx, {
          actor,
          depositId,
          action: 'invitation.withdrawn',
          subject: row.email,
          sentence: `${actor.name} withdrew the invitation to ${row.email}.`,
        });
      });
    },
    byLink,
    async view(token) {
      const row = await byLink(token);
      const account = await userByEmail(db, row.email);
      return {
        email: row.email,
        depositName: row.deposit_name,
        role: row.role,
        invitedBy: row.inviter,
        hasAccount: account !== undefined,
      };
    },
    async use(trx, invitation, person) {
      const used = await open(trx)
        .where({ id: invitation.id })
        .update({ accepted_at: clock().toISOString() });
      if (used === 0) throw noSuchInvitation();
      const { deposit_id: depositId, role } = invitation;
      if (depositId !== null && role !== null) {
        const membership = {
          deposit_id: depositId,
          user_id: person.id,
          role,
          since: clock().toISOString(),
        };
        await trx('memberships').insert(membership).onConflict(['deposit_id', 'user_id']).ignore(); // a role held already stays
      }
      await record.add(trx, {
        actor: person,
        depositId,
        action: 'invitation.accepted',
        subject: invitation.email,
        sentence: `${person.name} accepted the invitation of ${invitation.inviter}${role === null ? '' : ` as ${role}`}.`,
      });
    },
  };
}
