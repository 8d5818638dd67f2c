import type { Knex } from 'knex';
import type { Deposit, DepositBody, DepositListRow, PayAnalyte } from '#contract/deposits.ts';
import type { Role } from '#contract/roles.ts';
import { transact } from '#server/db/transact.ts';
import type { Actor, Member } from '#server/lib/actor.ts';
import type { Clock } from '#server/lib/clock.ts';
import { orNotFound, staleVersion } from '#server/lib/errors.ts';
import type { RecordService } from '../record/record.service.ts';
import {
  activeLeads,
  columnsOf,
  depositById,
  type DepositRow,
  type MembershipRow,
  storedParts,
} from './deposits.repository.ts';

/** What stands in a list of deposits beside their names. */
export type DepositSummary = Pick<DepositListRow, 'holes' | 'metres' | 'finding'>;

/** Summaries by deposit id; a deposit left out has nothing loaded. */
export type DepositSummaries = (
  depositIds: readonly number[],
) => Promise<ReadonlyMap<number, DepositSummary>>;

const NOTHING_LOADED: DepositSummary = {
  holes: 0,
  metres: 0,
  finding: 'No drill holes are loaded yet.',
};

export interface DepositsDeps {
  db: Knex;
  clock: Clock;
  record: RecordService;
  depositSummaries: DepositSummaries;
}

export interface DepositsService {
  listOf(actor: Actor): Promise<DepositListRow[]>;
  create(body: DepositBody, actor: Actor): Promise<Deposit>;
  get(depositId: number, role: Role): Promise<Deposit>;
  payAnalytes(depositId: number): Promise<PayAnalyte[]>;
  /** @throws {AppError} 412 when somebody changed it since `expectedVersion`. */
  update(
    member: Member,
    body: DepositBody,
    expectedVersion: number,
    actor: Actor,
  ): Promise<Deposit>;
}

export function createDeposits({
  db,
  clock,
  record,
  depositSummaries,
}: DepositsDeps): DepositsService {
  async function get(depositId: number, role: Role): Promise<Deposit> {
    const row = orNotFound(await depositById(db, depositId), 'deposit');
    return {
      id: row.id,
      name: row.name,
      description: row.description,
      ...storedParts(row),
      isDemo: row.is_demo === 1,
      version: row.version,
      createdAt: row.created_at,
      myRole: role,
      leads: await activeLeads(db, row.id),
    };
  }

  async function insert(body: DepositBody, actor: Actor): Promise<number> {
    const now = clock().toISOString();
    return transact(db, async (trx) => {
      const [id] = await trx<DepositRow>('deposits').insert({
        ...columnsOf(body),
        created_at: now,
        created_by: actor.id,
      });
      if (id === undefined) throw new Error('the database gave no id for a new deposit');
      await trx<MembershipRow>('memberships').insert({
        deposit_id: id,
        user_id: actor.id,
        role: 'lead',
        since: now,
      });
      await record.add(trx, {
        actor,
        depositId: id,
        action: 'deposit.created',
        subject: `deposit ${id}`,
        sentence: `${actor.name} created the deposit ${body.name}.`,
      });
      return id;
    });
  }

  return {
    get,

    payAnalytes: async (depositId) =>
      storedParts(orNotFound(await depositById(db, depositId), 'deposit')).payAnalytes,

    async listOf(actor) {
      const rows = await db('deposits')
        .join('memberships', 'memberships.deposit_id', 'deposits.id')
        .where({ user_id: actor.id })
        .orderBy('deposits.name')
        .select<(DepositRow & { role: Role })[]>('deposits.*', 'memberships.role');
      const summaries = await depositSummaries(rows.map((row) => row.id));
      return rows.map((row) => ({
        id: row.id,
        name: row.name,
        description: row.description,
        isDemo: row.is_demo === 1,
        myRole: row.role,
        payAnalytes: storedParts(row).payAnalytes,
        ...(summaries.get(row.id) ?? NOTHING_LOADED),
      }));
    },

    create: async (body, actor) => get(await insert(body, actor), 'lead'),

    async update({ depositId, role }, body, expectedVersion, actor) {
      await transact(db, async (trx) => {
        const changed = await trx<DepositRow>('deposits')
          .where({ id: depositId, version: expectedVersion })
          .update({ ...columnsOf(body), version: expectedVersion + 1 });
        if (changed === 0)
          throw staleVersion(orNotFound(await depositById(trx, depositId), 'deposit').version);
        await record.add(trx, {
          actor,
          depositId,
          action: 'deposit.changed',
          subject: `deposit ${depositId}`,
          sentence: `${actor.name} changed the deposit's description, grid or analytes.`,
        });
      });
      return get(depositId, role);
    },
  };
}
