import type { Knex } from 'knex';
import { ComponentRun } from '#contract/components.ts';

export interface ComponentRunRow {
  id: number;
  deposit_id: number;
  created_by: number;
  created_at: string;
  suite_id: number;
  snapshot_id: string;
  table_id: number;
  seed: number;
  result: string;
}

interface NamedRow extends ComponentRunRow {
  created_by_name: string;
  suite_name: string;
  snapshot_number: number;
  frame_table_id: number;
}

/** What the task computed: everything but ids, names and dates. */
export const ComponentResult = ComponentRun.omit({
  id: true, suiteId: true, suiteName: true, snapshotId: true, snapshotNumber: true, frameTableId: true, tableId: true, isStale: true, seed: true, createdBy: true, createdAt: true,
});

export function componentsRepository(db: Knex) {
  const named = (depositId: number) =>
    db<NamedRow>('component_runs')
      .join('users', 'users.id', 'component_runs.created_by')
      .join('suites', 'suites.id', 'component_runs.suite_id')
      .join('snapshots', (on) => on.on('snapshots.id', 'component_runs.snapshot_id').andOn('snapshots.deposit_id', 'component_runs.deposit_id'))
      .where('component_runs.deposit_id', depositId)
      .select<NamedRow[]>('component_runs.*', 'users.name as created_by_name', 'suites.name as suite_name', 'snapshots.number as snapshot_number', 'snapshots.frame_table_id');

  const toRun = (row: NamedRow, currentSnapshotId: string): ComponentRun => ({
    ...ComponentResult.parse(JSON.parse(row.result)),
    id: row.id, suiteId: row.suite_id, suiteName: row.suite_name, snapshotId: row.snapshot_id, snapshotNumber: row.snapshot_number, frameTableId: row.frame_table_id,
    tableId: row.table_id, isStale: row.snapshot_id !== currentSnapshotId, seed: row.seed, createdBy: { id: row.created_by, name: row.created_by_name }, createdAt: row.created_at,
  });

  return {
    async list(depositId: number, currentSnapshotId: string): Promise<ComponentRun[]> {
      const rows: NamedRow[] = await named(depositId).orderBy('component_runs.id', 'desc').limit(50);
      return rows.map((row) => toRun(row, currentSnapshotId));
    },
    async find(depositId: number, runId: number, currentSnapshotId: string): Promise<ComponentRun | null> {
      const row: NamedRow | undefined = await named(depositId).where('component_runs.id', runId).first();
      return row ? toRun(row, currentSnapshotId) : null;
    },
    async insert(row: Omit<ComponentRunRow, 'id'>): Promise<number> {
      const [made] = await db<ComponentRunRow>('component_runs').insert(row).returning('id');
      return made?.id ?? 0;
    },
  };
}
