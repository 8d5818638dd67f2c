import type { Knex } from 'knex';
import { Group, Grouping, Sweep } from '#contract/groupings.ts';

export interface SweepRowStored {
  id: number;
  deposit_id: number;
  created_by: number;
  created_at: string;
  component_run_id: number;
  components: number;
  seed: number;
  result: string;
}

export interface GroupingRow {
  id: number;
  deposit_id: number;
  created_by: number;
  created_at: string;
  name: string;
  component_run_id: number;
  table_id: number;
  k: number;
  components: number;
  seed: number;
  is_active: number;
  result: string;
}

export interface GroupRow {
  grouping_id: number;
  label: number;
  name: string;
  slot: number;
  intervals: number;
  metres: number;
  version: number;
}

interface JoinedRow extends GroupingRow {
  created_by_name: string;
  suite_id: number;
  snapshot_id: string;
  component_table_id: number;
  snapshot_number: number;
  frame_table_id: number;
}

export const SweepResult = Sweep.pick({ kFrom: true, kTo: true, rows: true, silhouetteRows: true, suggestedK: true, suggestion: true });
const StoredGroup = Group.omit({ name: true, slot: true, version: true });
/** What the task computed; names and colours of groups are rows of their own. */
export const GroupingResult = Grouping.pick({ support: true, n: true, inertia: true, silhouette: true, silhouetteRows: true, calinskiHarabasz: true, fingerprints: true }).extend({ groups: StoredGroup.array() });

export function groupingsRepository(db: Knex) {
  const joined = (depositId: number) =>
    db<JoinedRow>('groupings')
      .join('users', 'users.id', 'groupings.created_by')
      .join('component_runs', 'component_runs.id', 'groupings.component_run_id')
      .join('snapshots', (on) => on.on('snapshots.id', 'component_runs.snapshot_id').andOn('snapshots.deposit_id', 'component_runs.deposit_id'))
      .where('groupings.deposit_id', depositId)
      .select<JoinedRow[]>('groupings.*', 'users.name as created_by_name', 'component_runs.suite_id', 'component_runs.snapshot_id', 'component_runs.table_id as component_table_id', 'snapshots.number as snapshot_number', 'snapshots.frame_table_id');

  const toGrouping = (row: JoinedRow, groups: readonly GroupRow[], currentSnapshotId: string): Grouping => {
    const { groups: stored, ...result } = GroupingResult.parse(JSON.parse(row.result));
    return {
      ...result,
      id: row.id, name: row.name, componentRunId: row.component_run_id, suiteId: row.suite_id, snapshotId: row.snapshot_id, snapshotNumber: row.snapshot_number,
      frameTableId: row.frame_table_id, componentTableId: row.component_table_id, tableId: row.table_id, isStale: row.snapshot_id !== currentSnapshotId, isActive: row.is_active === 1,
      k: row.k, components: row.components, seed: row.seed, createdBy: { id: row.created_by, name: row.created_by_name }, createdAt: row.created_at,
      groups: stored.map((group) => {
        const named = groups.find(({ grouping_id, label }) => grouping_id === row.id && label === group.label);
        return { ...group, name: named?.name ?? `Group ${group.label}`, slot: named?.slot ?? group.label, version: named?.version ?? 1 };
      }),
    };
  };

  const groupsOf = (ids: readonly number[]): Promise<GroupRow[]> => db<GroupRow>('groups').whereIn('grouping_id', ids).orderBy('label');

  return {
    async list(depositId: number, currentSnapshotId: string): Promise<Grouping[]> {
      const rows: JoinedRow[] = await joined(depositId).orderBy('groupings.id', 'desc').limit(50);
      const groups = await groupsOf(rows.map(({ id }) => id));
      return rows.map((row) => toGrouping(row, groups, currentSnapshotId));
    },
    async find(depositId: number, groupingId: number, currentSnapshotId: string): Promise<Grouping | null> {
      const row: JoinedRow | undefined = await joined(depositId).where('groupings.id', groupingId).first();
      return row ? toGrouping(row, await groupsOf([row.id]), currentSnapshotId) : null;
    },
    async active(depositId: number, currentSnapshotId: string): Promise<Grouping | null> {
      const row: JoinedRow | undefined = await joined(depositId).where('groupings.is_active', 1).first();
      return row ? toGrouping(row, await groupsOf([row.id]), currentSnapshotId) : null;
    },
    async sweeps(depositId: number, currentSnapshotId: string): Promise<Sweep[]> {
      const rows: (SweepRowStored & { snapshot_id: string })[] = await db('sweeps')
        .join('component_runs', 'component_runs.id', 'sweeps.component_run_id')
        .where('sweeps.deposit_id', depositId).orderBy('sweeps.id', 'desc').limit(30)
        .select<(SweepRowStored & { snapshot_id: string })[]>('sweeps.*', 'component_runs.snapshot_id');
      return rows.map((row) => ({
        ...SweepResult.parse(JSON.parse(row.result)),
        id: row.id, componentRunId: row.component_run_id, components: row.components, seed: row.seed, isStale: row.snapshot_id !== currentSnapshotId, createdAt: row.created_at,
      }));
    },
    async insertSweep(row: Omit<SweepRowStored, 'id'>): Promise<number> {
      const [made] = await db<SweepRowStored>('sweeps').insert(row).returning('id');
      return made?.id ?? 0;
    },
    async insert(row: Omit<GroupingRow, 'id'>, groups: readonly Omit<GroupRow, 'grouping_id'>[]): Promise<number> {
      const [made] = await db<GroupingRow>('groupings').insert(row).returning('id');
      const id = made?.id ?? 0;
      await db<GroupRow>('groups').insert(groups.map((group) => ({ ...group, grouping_id: id })));
      return id;
    },
    async activate(depositId: number, groupingId: number): Promise<void> {
      await db<GroupingRow>('groupings').where({ deposit_id: depositId, is_active: 1 }).update({ is_active: 0 });
      await db<GroupingRow>('groupings').where({ deposit_id: depositId, id: groupingId }).update({ is_active: 1 });
    },
    group: (groupingId: number, label: number): Promise<GroupRow | undefined> => db<GroupRow>('groups').where({ grouping_id: groupingId, label }).first(),
    updateGroup: (groupingId: number, label: number, change: Partial<GroupRow>) => db<GroupRow>('groups').where({ grouping_id: groupingId, label }).update(change),
  };
}
