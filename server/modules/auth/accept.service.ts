import type { Knex } from 'knex';
import type { Me } from '#contract/auth.ts';
import { transact } from '#server/db/transact.ts';
import type { Clock } from '#server/lib/clock.ts';
import { AppError, orNotFound } from '#server/lib/errors.ts';
import type { AuthService } from './auth.service.ts';
import type { OpenInvitation } from './invitations.repository.ts';
import { type InvitationsService, noSuchInvitation } from './invitations.service.ts';
import type { Passwords } from './password-hasher.ts';
import { requireGoodPassword } from './password-rules.ts';
import type { Origin, Sessions } from './sessions.ts';
import type { Throttle } from './throttle.ts';
import {
  insertUser,
  type NewUser,
  publicPart,
  userByEmail,
  userById,
  type UserRow,
} from './users.repository.ts';

export interface AcceptDeps {
  db: Knex;
  clock: Clock;
  auth: AuthService;
  invitations: InvitationsService;
  passwords: Passwords;
  sessions: Sessions;
  throttle: Throttle;
}

interface Given {
  name?: string | undefined;
  password: string;
}

/** Accepts an invitation: the account it needs, the membership it brings, and a session. */
export type Accept = (
  token: string,
  given: Given,
  origin: Origin,
) => Promise<{ me: Me; depositId: number | null; cookie: string }>;

export function createAccept({
  db,
  clock,
  auth,
  invitations,
  passwords,
  sessions,
  throttle,
}: AcceptDeps): Accept {
  async function checkOwner(user: UserRow, password: string, address: string): Promise<void> {
    const attempt = await throttle.beginTry(user.email, address);
    const matches = await passwords.matches(password, user.password_hash);
    if (!matches || user.is_active === 0) {
      throw new AppError(
        403,
        'wrong-password',
        `The password is wrong: expected that of the account ${user.email}.`,
      );
    }
    await attempt.succeeded();
  }

  async function newAccount(
    { email }: OpenInvitation,
    { name, password }: Given,
  ): Promise<NewUser> {
    if (name === undefined) {
      const fields = [{ path: 'body.name', message: 'expected your name, found none' }];
      throw new AppError(400, 'invalid', 'A new account needs a name.', { fields });
    }
    requireGoodPassword(password, { name, email }, 'body.password');
    return {
      name,
      email,
      passwordHash: await passwords.hash(password),
      isAdministrator: false,
      createdAt: clock().toISOString(),
    };
  }

  /** Does the slow part (hashing) at once; what it returns makes or finds the account within the transaction. */
  async function prepare(
    invitation: OpenInvitation,
    given: Given,
    address: string,
  ): Promise<(trx: Knex) => Promise<UserRow>> {
    const user = await userByEmail(db, invitation.email);
    if (user) {
      await checkOwner(user, given.password, address);
      return () => Promise.resolve(user);
    }
    const account = await newAccount(invitation, given);
    return async (trx) => {
      if (await userByEmail(trx, account.email)) throw noSuchInvitation(); // the link was used twice at once
      return orNotFound(await userById(trx, await insertUser(trx, account)), 'account');
    };
  }

  return async (token, given, origin) => {
    const invitation = await invitations.byLink(token);
    const accountIn = await prepare(invitation, given, origin.address);
    return transact(db, async (trx) => {
      const person = await accountIn(trx);
      await invitations.use(trx, invitation, person);
      const cookie = await sessions.open(trx, person.id, origin);
      return { me: auth.me(publicPart(person)), depositId: invitation.deposit_id, cookie };
    });
  };
}
