import type { Knex } from 'knex';
import { CellDetail, Screen } from '#contract/screens.ts';

export interface ScreenRow {
  id: number;
  deposit_id: number;
  created_by: number;
  created_at: string;
  grouping_id: number | null;
  snapshot_id: string;
  support: 'drill' | 'surface';
  result: string;
}

interface JoinedRow extends ScreenRow {
  created_by_name: string;
  grouping_name: string | null;
  snapshot_number: number;
}

interface CellRow {
  screen_id: number;
  subset_key: string;
  variable: string;
  detail: string;
}

export const ScreenResult = Screen.pick({ variables: true, subsets: true, cells: true, finding: true });

export function screensRepository(db: Knex) {
  const joined = (depositId: number) =>
    db<JoinedRow>('screens')
      .join('users', 'users.id', 'screens.created_by')
      .leftJoin('groupings', 'groupings.id', 'screens.grouping_id')
      .join('snapshots', (on) => on.on('snapshots.id', 'screens.snapshot_id').andOn('snapshots.deposit_id', 'screens.deposit_id'))
      .where('screens.deposit_id', depositId)
      .select<JoinedRow[]>('screens.*', 'users.name as created_by_name', 'groupings.name as grouping_name', 'snapshots.number as snapshot_number');

  const toScreen = (row: JoinedRow, currentSnapshotId: string): Screen => ({
    ...ScreenResult.parse(JSON.parse(row.result)),
    id: row.id, groupingId: row.grouping_id, groupingName: row.grouping_name, snapshotId: row.snapshot_id, snapshotNumber: row.snapshot_number,
    isStale: row.snapshot_id !== currentSnapshotId, support: row.support, createdBy: { id: row.created_by, name: row.created_by_name }, createdAt: row.created_at,
  });

  return {
    async list(depositId: number, currentSnapshotId: string): Promise<Screen[]> {
      const rows: JoinedRow[] = await joined(depositId).orderBy('screens.id', 'desc').limit(20);
      return rows.map((row) => toScreen(row, currentSnapshotId));
    },
    async find(depositId: number, screenId: number, currentSnapshotId: string): Promise<Screen | null> {
      const row: JoinedRow | undefined = await joined(depositId).where('screens.id', screenId).first();
      return row ? toScreen(row, currentSnapshotId) : null;
    },
    async cell(screenId: number, subsetKey: string, variable: string): Promise<CellDetail | null> {
      const row = await db<CellRow>('screen_cells').where({ screen_id: screenId, subset_key: subsetKey, variable }).first();
      return row ? CellDetail.parse(JSON.parse(row.detail)) : null;
    },
    async insert(row: Omit<ScreenRow, 'id'>, cells: readonly CellDetail[]): Promise<number> {
      const [made] = await db<ScreenRow>('screens').insert(row).returning('id');
      const id = made?.id ?? 0;
      const rows = cells.map((cell) => ({ screen_id: id, subset_key: cell.subsetKey, variable: cell.variable, detail: JSON.stringify(cell) }));
      const batch = 50;
      for (let start = 0; start < rows.length; start += batch) await db<CellRow>('screen_cells').insert(rows.slice(start, start + batch));
      return id;
    },
  };
}
