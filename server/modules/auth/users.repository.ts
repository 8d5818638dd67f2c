import type { Knex } from 'knex';
import type { Me } from '#contract/auth.ts';
import type { Actor } from '#server/lib/actor.ts';

export interface UserRow {
  id: number;
  email: string;
  name: string;
  password_hash: string | null;
  is_administrator: number;
  is_active: number;
  created_at: string;
  last_seen_at: string | null;
}

export interface NewUser {
  email: string;
  name: string;
  passwordHash: string | null;
  isAdministrator: boolean;
  createdAt: string;
}

export const userByEmail = (db: Knex, email: string): Promise<UserRow | undefined> =>
  db<UserRow>('users').where({ email }).first();

export const userById = (db: Knex, id: number): Promise<UserRow | undefined> =>
  db<UserRow>('users').where({ id }).first();

export async function insertUser(db: Knex, user: NewUser): Promise<number> {
  const [id] = await db<UserRow>('users').insert({
    email: user.email,
    name: user.name,
    password_hash: user.passwordHash,
    is_administrator: user.isAdministrator ? 1 : 0,
    created_at: user.createdAt,
  });
  if (id === undefined) throw new Error('the database gave no id for a new user');
  return id;
}

export const publicPart = (row: UserRow): Omit<Me, 'isDemoInstance'> => ({
  id: row.id,
  email: row.email,
  name: row.name,
  isAdministrator: row.is_administrator === 1,
});

export const actorOf = (row: UserRow, via: Actor['via']): Actor => ({ ...publicPart(row), via });
