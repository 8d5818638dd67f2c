import type { Knex } from 'knex';
import * as z from 'zod';
import type { Suite, SuiteBody } from '#contract/suites.ts';
import { transact } from '#server/db/transact.ts';
import type { Actor } from '#server/lib/actor.ts';
import type { Clock } from '#server/lib/clock.ts';
import { AppError, orNotFound, staleVersion } from '#server/lib/errors.ts';
import type { RecordService } from '#server/modules/record/record.service.ts';
import type { SnapshotsService } from '#server/modules/snapshots/snapshots.service.ts';

interface SuiteRow {
  id: number;
  deposit_id: number;
  created_by: number;
  created_at: string;
  name: string;
  note: string;
  support: 'drill' | 'surface';
  analytes: string;
  replacement_fraction: number;
  version: number;
}

interface NamedSuiteRow extends SuiteRow {
  created_by_name: string;
  runs: number;
}

const Analytes = z.array(z.string());

const toSuite = (row: NamedSuiteRow): Suite => ({
  id: row.id, name: row.name, note: row.note, support: row.support, analytes: Analytes.parse(JSON.parse(row.analytes)), replacementFraction: row.replacement_fraction,
  version: row.version, createdBy: { id: row.created_by, name: row.created_by_name }, createdAt: row.created_at, runs: row.runs,
});

export function createSuites(db: Knex, clock: Clock, record: RecordService, snapshots: SnapshotsService) {
  const named = (depositId: number, trx: Knex = db) =>
    trx<NamedSuiteRow>('suites')
      .join('users', 'users.id', 'suites.created_by')
      .where('suites.deposit_id', depositId)
      .select<NamedSuiteRow[]>('suites.*', 'users.name as created_by_name', trx.raw('(SELECT count(*) FROM component_runs WHERE component_runs.suite_id = suites.id) AS runs'));

  async function get(depositId: number, suiteId: number, trx: Knex = db): Promise<Suite> {
    const row: NamedSuiteRow | undefined = await named(depositId, trx).where('suites.id', suiteId).first();
    return toSuite(orNotFound(row, 'suite'));
  }

  /** Every analyte must be in the snapshot, at the suite's support. */
  async function checkAnalytes(depositId: number, { analytes, support }: SuiteBody): Promise<void> {
    const snapshot = await snapshots.ready(depositId);
    const known = new Set(snapshot.analytes.filter(({ supports }) => supports.includes(support)).map(({ analyte }) => analyte));
    const unknown = analytes.filter((analyte) => !known.has(analyte));
    if (unknown.length === 0) return;
    const message = `expected analytes of the loaded ${support === 'drill' ? 'assays' : 'surface samples'}, found ${unknown.join(', ')}`;
    throw new AppError(400, 'unknown-analyte', `Analytes: ${message}.`, { fields: [{ path: 'body.analytes', message }] });
  }

  const columnsOf = (body: SuiteBody) => ({
    name: body.name, note: body.note, support: body.support, analytes: JSON.stringify(body.analytes), replacement_fraction: body.replacementFraction,
  });

  return {
    get,
    async list(depositId: number): Promise<Suite[]> {
      const rows: NamedSuiteRow[] = await named(depositId).orderBy('suites.id', 'desc');
      return rows.map(toSuite);
    },

    async create(depositId: number, body: SuiteBody, actor: Actor): Promise<Suite> {
      await checkAnalytes(depositId, body);
      return transact(db, async (trx) => {
        const [made] = await trx<SuiteRow>('suites')
          .insert({ ...columnsOf(body), deposit_id: depositId, created_by: actor.id, created_at: clock().toISOString(), version: 1 })
          .returning('id');
        const id = made?.id ?? 0;
        await record.add(trx, { actor, depositId, action: 'suite.created', subject: `suite ${id}`, sentence: `${actor.name} chose suite “${body.name}”: ${body.analytes.length} analytes` });
        return get(depositId, id, trx);
      });
    },

    async update(depositId: number, suiteId: number, body: SuiteBody, expectedVersion: number, actor: Actor): Promise<Suite> {
      await get(depositId, suiteId);
      await checkAnalytes(depositId, body);
      return transact(db, async (trx) => {
        const suite = await get(depositId, suiteId, trx);
        if (suite.version !== expectedVersion) throw staleVersion(suite.version);
        const changesNumbers = suite.analytes.join() !== body.analytes.join() || suite.support !== body.support || suite.replacementFraction !== body.replacementFraction;
        if (suite.runs > 0 && changesNumbers) {
          throw new AppError(409, 'suite-in-use', `${suite.runs} component runs stand on this suite: make a new suite to change its analytes.`);
        }
        await trx<SuiteRow>('suites').where({ id: suiteId }).update({ ...columnsOf(body), version: suite.version + 1 });
        await record.add(trx, { actor, depositId, action: 'suite.changed', subject: `suite ${suiteId}`, sentence: `${actor.name} changed suite “${body.name}”` });
        return get(depositId, suiteId, trx);
      });
    },

    async remove(depositId: number, suiteId: number, expectedVersion: number, actor: Actor) {
      await transact(db, async (trx) => {
        const suite = await get(depositId, suiteId, trx);
        if (suite.version !== expectedVersion) throw staleVersion(suite.version);
        if (suite.runs > 0) throw new AppError(409, 'suite-in-use', `${suite.runs} component runs stand on this suite: it is kept.`);
        await trx<SuiteRow>('suites').where({ id: suiteId }).delete();
        await record.add(trx, { actor, depositId, action: 'suite.deleted', subject: `suite ${suiteId}`, sentence: `${actor.name} deleted suite “${suite.name}”` });
      });
      return { done: true as const };
    },
  };
}
export type SuitesService = ReturnType<typeof createSuites>;
