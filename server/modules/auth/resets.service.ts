import type { Knex } from 'knex';
import { transact } from '#server/db/transact.ts';
import type { Background } from '#server/lib/background.ts';
import { type Clock, HOUR_MS, instantAfter } from '#server/lib/clock.ts';
import { AppError } from '#server/lib/errors.ts';
import type { Log } from '#server/lib/log.ts';
import { randomToken, sha256Hex } from '#server/lib/secrets.ts';
import type { Mailer } from '../mail/mailer.ts';
import { resetMessage } from '../mail/messages.ts';
import type { RecordService } from '../record/record.service.ts';
import type { Passwords } from './password-hasher.ts';
import { requireGoodPassword } from './password-rules.ts';
import type { Sessions } from './sessions.ts';
import type { Throttle } from './throttle.ts';
import { userByEmail, type UserRow } from './users.repository.ts';

const RESET_LIFE_MS = HOUR_MS;

interface ResetRow {
  token_hash: string;
  user_id: number;
  created_at: string;
  expires_at: string;
  used_at: string | null;
}

export interface ResetsDeps {
  db: Knex;
  clock: Clock;
  log: Log;
  background: Background;
  mailer: Mailer;
  passwords: Passwords;
  record: RecordService;
  sessions: Sessions;
  throttle: Throttle;
  publicUrl: string;
}

export interface ResetsService {
  /** Sends a link when the account exists. Returns before looking, so that no answer tells. */
  ask(email: string, address: string): void;
  /** Sets a new password and ends every session. @throws {AppError} 404 for a link that is not valid. */
  use(token: string, newPassword: string): Promise<void>;
}

const noSuchLink = (): AppError =>
  new AppError(
    404,
    'no-such-link',
    'This link does not work: it was used, it has expired, or a newer one replaced it. Ask for a new one.',
  );

/** Makes a person's one reset link, without sending it; an older link stops working. */
export async function makeResetLink(
  trx: Knex,
  userId: number,
  clock: Clock,
  publicUrl: string,
): Promise<string> {
  const token = randomToken();
  await trx<ResetRow>('password_resets').where({ user_id: userId }).delete();
  await trx<ResetRow>('password_resets').insert({
    token_hash: sha256Hex(token),
    user_id: userId,
    created_at: clock().toISOString(),
    expires_at: instantAfter(clock, RESET_LIFE_MS),
    used_at: null,
  });
  return `${publicUrl}/reset/${token}`;
}

export function createResets(deps: ResetsDeps): ResetsService {
  const { db, clock, log, background, mailer, passwords, record, sessions, throttle, publicUrl } =
    deps;

  return {
    ask(email, address) {
      background.run('password reset', async () => {
        const user = await userByEmail(db, email);
        if (!(await throttle.mayMail(email, address)) || !user || user.is_active === 0) return;
        const link = await transact(db, (trx) => makeResetLink(trx, user.id, clock, publicUrl));
        await mailer.send(resetMessage({ to: user.email, link }));
        log.info({ event: 'password.reset-sent', userId: user.id }, 'reset link sent');
      });
    },

    async use(token, newPassword) {
      const live = (trx: Knex) =>
        trx<ResetRow>('password_resets')
          .where({ token_hash: sha256Hex(token), used_at: null })
          .andWhere('expires_at', '>', clock().toISOString());
      const link = await live(db).first();
      const user =
        link && (await db<UserRow>('users').where({ id: link.user_id, is_active: 1 }).first());
      if (!user) throw noSuchLink();
      requireGoodPassword(newPassword, user, 'body.newPassword');
      const hash = await passwords.hash(newPassword);
      await transact(db, async (trx) => {
        const used = await live(trx).update({ used_at: clock().toISOString() });
        if (used === 0) throw noSuchLink();
        await trx<UserRow>('users').where({ id: user.id }).update({ password_hash: hash });
        await sessions.endAllOf(trx, user.id);
        await record.add(trx, {
          actor: user,
          depositId: null,
          action: 'password.reset',
          subject: `person ${user.id}`,
          sentence: `${user.name} set a new password by a reset link.`,
        });
      });
      log.info({ event: 'password.reset', userId: user.id }, 'password reset');
    },
  };
}
