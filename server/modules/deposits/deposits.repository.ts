import type { Knex } from 'knex';
import * as z from 'zod';
import { type DepositBody, Grid, PayAnalyte } from '#contract/deposits.ts';
import type { Role } from '#contract/roles.ts';
import type { Person } from '#server/lib/actor.ts';

export interface DepositRow {
  id: number;
  name: string;
  description: string;
  grid: string;
  pay_analytes: string;
  deleterious_analytes: string;
  is_demo: number;
  version: number;
  created_at: string;
  created_by: number | null;
}

export interface MembershipRow {
  deposit_id: number;
  user_id: number;
  role: Role;
  since: string;
}

const Stored = z.object({
  grid: Grid,
  payAnalytes: z.array(PayAnalyte),
  deleteriousAnalytes: z.array(z.string()),
});

const fromJson = (text: string): unknown => JSON.parse(text);

/** The JSON columns of a deposit, read back by the contract's own schemas. */
export const storedParts = (row: DepositRow) =>
  Stored.parse({
    grid: fromJson(row.grid),
    payAnalytes: fromJson(row.pay_analytes),
    deleteriousAnalytes: fromJson(row.deleterious_analytes),
  });

export const columnsOf = (body: DepositBody) => ({
  name: body.name,
  description: body.description,
  grid: JSON.stringify(body.grid),
  pay_analytes: JSON.stringify(body.payAnalytes),
  deleterious_analytes: JSON.stringify(body.deleteriousAnalytes),
});

export const depositById = (db: Knex, id: number): Promise<DepositRow | undefined> =>
  db<DepositRow>('deposits').where({ id }).first();

export async function roleOn(db: Knex, depositId: number, userId: number): Promise<Role | null> {
  const row = await db<MembershipRow>('memberships')
    .where({ deposit_id: depositId, user_id: userId })
    .first();
  return row?.role ?? null;
}

/** Leads who can act: of active accounts. */
export const activeLeads = (db: Knex, depositId: number): Promise<Person[]> =>
  db('memberships')
    .join('users', 'users.id', 'memberships.user_id')
    .where({ deposit_id: depositId, role: 'lead', is_active: 1 })
    .orderBy('users.name')
    .select<Person[]>('users.id', 'users.name');
