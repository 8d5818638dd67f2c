import type { Knex } from 'knex';
import type { Role } from '#contract/roles.ts';
import { transact } from '#server/db/transact.ts';
import type { Actor } from '#server/lib/actor.ts';
import { type Clock, DAY_MS, HOUR_MS, instantAfter } from '#server/lib/clock.ts';
import { AppError, orNotFound } from '#server/lib/errors.ts';
import type { Log } from '#server/lib/log.ts';
import { randomToken, sha256Hex } from '#server/lib/secrets.ts';
import type { Mailer } from '../mail/mailer.ts';
import { invitationMessage } from '../mail/messages.ts';
import type { RecordService } from '../record/record.service.ts';
import {
  type InvitationRow,
  type OpenInvitation,
  openInvitations,
  openInvitationsWithNames,
} from './invitations.repository.ts';

const INVITATION_LIFE_MS = 7 * DAY_MS;
const INVITATIONS_AN_HOUR = 40;

export interface InvitationsDeps {
  db: Knex;
  clock: Clock;
  log: Log;
  mailer: Mailer;
  record: RecordService;
  publicUrl: string;
}

/** To a deposit with a role; to the instance when null. */
type Where = { id: number; role: Role } | null;

/** Writes an invitation, sends it, and takes it back when the mail server refuses it. */
export type SendInvitation = (where: Where, email: string, actor: Actor) => Promise<OpenInvitation>;

export function createSendInvitation({
  db,
  clock,
  log,
  mailer,
  record,
  publicUrl,
}: InvitationsDeps): SendInvitation {
  async function refuseTooMany(actor: Actor): Promise<void> {
    const sent = await db<InvitationRow>('invitations')
      .where({ invited_by: actor.id })
      .andWhere('created_at', '>', instantAfter(clock, -HOUR_MS));
    if (sent.length < INVITATIONS_AN_HOUR) return;
    const message = `At most ${INVITATIONS_AN_HOUR} invitations an hour: wait, then go on.`;
    throw new AppError(429, 'too-many-invitations', message, { retryAfterS: HOUR_MS / 4000 });
  }

  async function write(
    where: Where,
    email: string,
    actor: Actor,
    tokenHash: string,
  ): Promise<void> {
    const depositId = where?.id ?? null;
    await transact(db, async (trx) => {
      if (await openInvitations(trx, clock).where({ deposit_id: depositId, email }).first()) {
        const message = `An invitation to ${email} is open: withdraw it first, or wait for the answer.`;
        throw new AppError(409, 'already-invited', message);
      }
      await trx<InvitationRow>('invitations').insert({
        deposit_id: depositId,
        role: where?.role ?? null,
        email,
        token_hash: tokenHash,
        invited_by: actor.id,
        created_at: clock().toISOString(),
        expires_at: instantAfter(clock, INVITATION_LIFE_MS),
      });
      await record.add(trx, {
        actor,
        depositId,
        action: 'person.invited',
        subject: email,
        sentence: `${actor.name} invited ${email}${where ? ` as ${where.role}` : ' to the instance'}.`,
      });
    });
  }

  async function deliver(row: OpenInvitation, token: string, actor: Actor): Promise<void> {
    const deposit =
      row.deposit_name !== null && row.role !== null
        ? { name: row.deposit_name, role: row.role }
        : null;
    const link = `${publicUrl}/accept/${token}`;
    try {
      await mailer.send(invitationMessage({ to: row.email, link, invitedBy: actor.name, deposit }));
    } catch (error) {
      log.error({ event: 'mail.failed', err: error }, 'an invitation could not be sent');
      await db<InvitationRow>('invitations')
        .where({ id: row.id })
        .update({ withdrawn_at: clock().toISOString() });
      const message = `The mail server did not take the invitation to ${row.email}; nobody was invited. Try again later.`;
      throw new AppError(502, 'mail-not-sent', message);
    }
  }

  return async (where, email, actor) => {
    await refuseTooMany(actor);
    const token = randomToken();
    await write(where, email, actor, sha256Hex(token));
    const written = await openInvitationsWithNames(db, clock)
      .where({ token_hash: sha256Hex(token) })
      .first();
    const row = orNotFound(written, 'invitation');
    await deliver(row, token, actor);
    return row;
  };
}
