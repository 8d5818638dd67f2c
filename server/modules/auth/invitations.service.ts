import type { Knex } from 'knex';
import type { InvitationView } from '#contract/auth.ts';
import type { PendingInvitation } from '#contract/deposits.ts';
import type { Role } from '#contract/roles.ts';
import { transact } from '#server/db/transact.ts';
import type { Actor, Person } from '#server/lib/actor.ts';
import { type Clock, DAY_MS, HOUR_MS, instantAfter } from '#server/lib/clock.ts';
import { AppError, notFound } from '#server/lib/errors.ts';
import type { Log } from '#server/lib/log.ts';
import { randomToken, sha256Hex } from '#server/lib/secrets.ts';
import type { Mailer } from '../mail/mailer.ts';
import { invitationMessage } from '../mail/messages.ts';
import type { RecordService } from '../record/record.service.ts';
import { userByEmail, type UserRow } from './users.repository.ts';

const INVITATION_LIFE_MS = 7 * DAY_MS;
const INVITATIONS_AN_HOUR = 40;

interface InvitationRow {
  id: number;
  deposit_id: number | null;
  role: Role | null;
  email: string;
  token_hash: string;
  invited_by: number;
  created_at: string;
  expires_at: string;
  accepted_at: string | null;
  withdrawn_at: string | null;
}

/** An open invitation with the names people know. */
export interface OpenInvitation extends InvitationRow {
  inviter: string;
  deposit_name: string | null;
}

export interface InvitationsDeps {
  db: Knex;
  clock: Clock;
  log: Log;
  mailer: Mailer;
  record: RecordService;
  publicUrl: string;
}

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

export function createInvitations({
  db,
  clock,
  log,
  mailer,
  record,
  publicUrl,
}: InvitationsDeps): InvitationsService {
  const open = (trx: Knex) =>
    trx<InvitationRow>('invitations')
      .whereNull('accepted_at')
      .whereNull('withdrawn_at')
      .andWhere('expires_at', '>', clock().toISOString());
  const openWithNames = () =>
    open(db)
      .join('users', 'users.id', 'invitations.invited_by')
      .leftJoin('deposits', 'deposits.id', 'invitations.deposit_id')
      .select<OpenInvitation[]>(
        'invitations.*',
        'users.name as inviter',
        'deposits.name as deposit_name',
      );

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

  async function refuseTooMany(actor: Actor): Promise<void> {
    const sent = await db<InvitationRow>('invitations')
      .where({ invited_by: actor.id })
      .andWhere('created_at', '>', instantAfter(clock, -HOUR_MS));
    if (sent.length < INVITATIONS_AN_HOUR) return;
    throw new AppError(
      429,
      'too-many-invitations',
      `At most ${INVITATIONS_AN_HOUR} invitations an hour: wait, then go on.`,
      { retryAfterS: HOUR_MS / 4000 },
    );
  }

  /** Writes the invitation, sends it, and takes it back when the mail server refuses it. */
  async function send(
    deposit: { id: number; role: Role } | null,
    email: string,
    actor: Actor,
  ): Promise<OpenInvitation> {
    await refuseTooMany(actor);
    const token = randomToken();
    const tokenHash = sha256Hex(token);
    await transact(db, async (trx) => {
      const again = await open(trx)
        .where({ deposit_id: deposit?.id ?? null, email })
        .first();
      if (again)
        throw new AppError(
          409,
          'already-invited',
          `An invitation to ${email} is open: withdraw it first, or wait for the answer.`,
        );
      await trx<InvitationRow>('invitations').insert({
        deposit_id: deposit?.id ?? null,
        role: deposit?.role ?? null,
        email,
        token_hash: tokenHash,
        invited_by: actor.id,
        created_at: clock().toISOString(),
        expires_at: instantAfter(clock, INVITATION_LIFE_MS),
      });
      const as = deposit ? ` as ${deposit.role}` : ' to the instance';
      await record.add(trx, {
        actor,
        depositId: deposit?.id ?? null,
        action: 'person.invited',
        subject: email,
        sentence: `${actor.name} invited ${email}${as}.`,
      });
    });
    const row = await openWithNames().where({ token_hash: tokenHash }).first();
    if (!row) throw new Error('the invitation just written is not there');
    try {
      const where =
        row.deposit_name !== null && row.role !== null
          ? { name: row.deposit_name, role: row.role }
          : null;
      await mailer.send(
        invitationMessage({
          to: email,
          link: `${publicUrl}/accept/${token}`,
          invitedBy: actor.name,
          deposit: where,
        }),
      );
    } catch (error) {
      log.error({ event: 'mail.failed', err: error }, 'an invitation could not be sent');
      await db<InvitationRow>('invitations')
        .where({ id: row.id })
        .update({ withdrawn_at: clock().toISOString() });
      throw new AppError(
        502,
        'mail-not-sent',
        `The mail server did not take the invitation to ${email}; nobody was invited. Try again later.`,
      );
    }
    return row;
  }

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
