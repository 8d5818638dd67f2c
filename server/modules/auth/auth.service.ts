import type { Knex } from 'knex';
import type { Me } from '#contract/auth.ts';
import { transact } from '#server/db/transact.ts';
import type { Actor } from '#server/lib/actor.ts';
import { AppError } from '#server/lib/errors.ts';
import type { Log } from '#server/lib/log.ts';
import type { RecordService } from '../record/record.service.ts';
import type { Passwords } from './password-hasher.ts';
import { requireGoodPassword } from './password-rules.ts';
import type { Origin, Sessions } from './sessions.ts';
import type { Throttle } from './throttle.ts';
import { publicPart, userByEmail, userById, type UserRow } from './users.repository.ts';

export interface AuthDeps {
  db: Knex;
  log: Log;
  passwords: Passwords;
  record: RecordService;
  sessions: Sessions;
  throttle: Throttle;
  isDemoInstance: boolean;
}

export interface AuthService {
  me(user: Omit<Me, 'isDemoInstance'>): Me;
  signIn(
    given: { email: string; password: string },
    origin: Origin,
  ): Promise<{ me: Me; cookie: string }>;
  signOut(actor: Actor): Promise<void>;
  rename(actor: Actor, name: string): Promise<Me>;
  /** Asks for the password again before something grave. @throws {AppError} 403 or 429. */
  confirmPassword(actor: Actor, password: string, address: string): Promise<void>;
  changePassword(
    actor: Actor,
    given: { currentPassword: string; newPassword: string },
    address: string,
  ): Promise<void>;
}

const wrongSignIn = (): AppError =>
  new AppError(401, 'sign-in-failed', 'The e-mail address or the password is wrong.');
const wrongPassword = (): AppError => new AppError(403, 'wrong-password', 'The password is wrong.');

export function createAuth({
  db,
  log,
  passwords,
  record,
  sessions,
  throttle,
  isDemoInstance,
}: AuthDeps): AuthService {
  const me: AuthService['me'] = ({ id, email, name, isAdministrator }) => ({
    id,
    email,
    name,
    isAdministrator,
    isDemoInstance,
  });

  async function confirmPassword(actor: Actor, password: string, address: string): Promise<void> {
    const attempt = await throttle.beginTry(actor.email, address);
    const user = await userById(db, actor.id);
    if (!(await passwords.matches(password, user?.password_hash ?? null))) {
      log.warn(
        { event: 'password.wrong', userId: actor.id },
        'wrong password of a signed-in person',
      );
      throw wrongPassword();
    }
    await attempt.succeeded();
  }

  return {
    me,

    async signIn({ email, password }, origin) {
      const attempt = await throttle.beginTry(email, origin.address);
      const user = await userByEmail(db, email);
      const matches = await passwords.matches(password, user?.password_hash ?? null);
      if (!user || !matches || user.is_active === 0) {
        log.warn(
          { event: 'sign-in.failed', userId: user?.id ?? null, address: origin.address },
          'sign-in failed',
        );
        throw wrongSignIn();
      }
      await attempt.succeeded();
      const cookie = await transact(db, (trx) => sessions.open(trx, user.id, origin));
      log.info({ event: 'sign-in.ok', userId: user.id, address: origin.address }, 'signed in');
      return { me: me(publicPart(user)), cookie };
    },

    async signOut(actor) {
      if (actor.via.kind === 'session') await sessions.end(actor, actor.via.sessionId);
      log.info({ event: 'sign-out', userId: actor.id }, 'signed out');
    },

    async rename(actor, name) {
      await transact(db, async (trx) => {
        await trx<UserRow>('users').where({ id: actor.id }).update({ name });
        await record.add(trx, {
          actor,
          depositId: null,
          action: 'person.renamed',
          subject: `person ${actor.id}`,
          sentence: `${actor.name} is now called ${name}.`,
        });
      });
      return me({ ...actor, name });
    },

    confirmPassword,

    async changePassword(actor, { currentPassword, newPassword }, address) {
      await confirmPassword(actor, currentPassword, address);
      requireGoodPassword(newPassword, actor, 'body.newPassword');
      const hash = await passwords.hash(newPassword);
      await transact(db, async (trx) => {
        await trx<UserRow>('users').where({ id: actor.id }).update({ password_hash: hash });
        await sessions.endAllOf(
          trx,
          actor.id,
          actor.via.kind === 'session' ? actor.via.sessionId : undefined,
        );
        await record.add(trx, {
          actor,
          depositId: null,
          action: 'password.changed',
          subject: `person ${actor.id}`,
          sentence: `${actor.name} changed their password.`,
        });
      });
      log.info({ event: 'password.changed', userId: actor.id }, 'password changed');
    },
  };
}
