import bcrypt from 'bcryptjs';
import type { Knex } from 'knex';
import { type Role, ROLES } from '#contract/roles.ts';
import type { Env } from '#server/lib/env.ts';
import type { PasswordHasher } from '#server/modules/auth/password-hasher.ts';
import { createSessions } from '#server/modules/auth/sessions.ts';
import { insertUser } from '#server/modules/auth/users.repository.ts';

/** Whom a request is made as: a role on deposit A, the lead of deposit B, a person with no deposit, an administrator, nobody. */
export type Who = Role | 'lead-of-b' | 'outsider' | 'administrator' | null;

/** One password for every test person, hashed once and cheaply. */
export const PASSWORD = 'plum wagon 41 otters';
const CHEAP_COST = 4;
const PASSWORD_HASH = bcrypt.hashSync(PASSWORD, CHEAP_COST);

export const cheapHasher: PasswordHasher = {
  hash: (password) => bcrypt.hash(password, CHEAP_COST),
  verify: (password, hash) => bcrypt.compare(password, hash),
};

export interface TestPerson {
  id: number;
  name: string;
  email: string;
  /** Value of the session cookie. */
  cookie: string;
}

export interface TestPeople {
  /** Deposit A, where each role has one person. */
  depositId: number;
  /** Deposit B, of `lead-of-b`; nobody else belongs to it. */
  otherDepositId: number;
  of(who: Exclude<Who, null>): TestPerson;
}

export const DEPOSIT_BODY = {
  name: 'Larkspur Hill',
  description: 'Invented for the tests',
  grid: { kind: 'local', name: 'Mine grid' },
  payAnalytes: [{ analyte: 'Cu', unit: '%' }],
  deleteriousAnalytes: ['As'],
} as const;

async function insertDeposit(db: Knex, name: string, now: string): Promise<number> {
  const [id] = await db('deposits').insert({
    name,
    description: DEPOSIT_BODY.description,
    grid: JSON.stringify(DEPOSIT_BODY.grid),
    created_at: now,
    pay_analytes: JSON.stringify(DEPOSIT_BODY.payAnalytes),
    deleterious_analytes: JSON.stringify(DEPOSIT_BODY.deleteriousAnalytes),
  });
  if (id === undefined) throw new Error('no deposit was made');
  return id;
}

/** Fills a fresh database with two deposits and one signed-in person of each kind. */
export async function insertPeople(db: Knex, env: Env, clock: () => Date): Promise<TestPeople> {
  const sessions = createSessions(db, env.sessionSecret, clock);
  const now = clock().toISOString();
  const people = new Map<string, TestPerson>();
  const depositId = await insertDeposit(db, 'Deposit A', now);
  const otherDepositId = await insertDeposit(db, 'Deposit B', now);

  const add = async (who: Exclude<Who, null>): Promise<number> => {
    const name = `Test ${who.replaceAll('-', ' ')}`;
    const email = `${who}@test.example`;
    const id = await insertUser(db, {
      email,
      name,
      passwordHash: PASSWORD_HASH,
      isAdministrator: who === 'administrator',
      createdAt: now,
    });
    people.set(who, {
      id,
      name,
      email,
      cookie: await sessions.open(db, id, { address: '127.0.0.1', userAgent: 'tests' }),
    });
    return id;
  };
  for (const role of ROLES) {
    await db('memberships').insert({
      deposit_id: depositId,
      user_id: await add(role),
      role,
      since: now,
    });
  }
  await db('memberships').insert({
    deposit_id: otherDepositId,
    user_id: await add('lead-of-b'),
    role: 'lead',
    since: now,
  });
  await add('outsider');
  await add('administrator');

  return {
    depositId,
    otherDepositId,
    of(who) {
      const person = people.get(who);
      if (!person) throw new Error(`there is no test person ${who}`);
      return person;
    },
  };
}
