import type { Knex } from 'knex';
import { CodeSet } from '#contract/codes.ts';

export interface CodeSetRow {
  id: number;
  deposit_id: number;
  created_by: number;
  created_at: string;
  number: number;
  snapshot_id: string;
  grouping_id: number;
  zone_run_id: number | null;
  recipe: string;
  recipe_sha256: string;
  sha256: string;
  size_bytes: number;
  file_name: string;
  result: string;
}

interface JoinedRow extends CodeSetRow {
  created_by_name: string;
  snapshot_number: number;
}

export const CodeResult = CodeSet.pick({ rows: true, metres: true, byCode: true, notes: true });
const Recipe = CodeSet.shape.recipe.shape.rules;

export function codesRepository(db: Knex) {
  const joined = (depositId: number) =>
    db<JoinedRow>('code_sets')
      .join('users', 'users.id', 'code_sets.created_by')
      .join('snapshots', (on) => on.on('snapshots.id', 'code_sets.snapshot_id').andOn('snapshots.deposit_id', 'code_sets.deposit_id'))
      .where('code_sets.deposit_id', depositId)
      .select<JoinedRow[]>('code_sets.*', 'users.name as created_by_name', 'snapshots.number as snapshot_number');

  /** Stale once tables or domains changed after it was made. */
  const toCodeSet = (row: JoinedRow, now: { snapshotId: string; recipeSha256: string }): CodeSet => ({
    ...CodeResult.parse(JSON.parse(row.result)),
    id: row.id, number: row.number, snapshotId: row.snapshot_id, snapshotNumber: row.snapshot_number, groupingId: row.grouping_id, zoneRunId: row.zone_run_id,
    isStale: row.snapshot_id !== now.snapshotId || row.recipe_sha256 !== now.recipeSha256,
    recipe: { rules: Recipe.parse(JSON.parse(row.recipe)), recipeSha256: row.recipe_sha256 },
    sizeBytes: row.size_bytes, sha256: row.sha256, fileName: row.file_name, createdBy: { id: row.created_by, name: row.created_by_name }, createdAt: row.created_at,
  });

  return {
    async list(depositId: number, now: Parameters<typeof toCodeSet>[1]): Promise<CodeSet[]> {
      const rows: JoinedRow[] = await joined(depositId).orderBy('code_sets.id', 'desc').limit(50);
      return rows.map((row) => toCodeSet(row, now));
    },
    async find(depositId: number, codeSetId: number, now: Parameters<typeof toCodeSet>[1]): Promise<CodeSet | null> {
      const row: JoinedRow | undefined = await joined(depositId).where('code_sets.id', codeSetId).first();
      return row ? toCodeSet(row, now) : null;
    },
    async nextNumber(depositId: number): Promise<number> {
      const [largest] = await db<CodeSetRow>('code_sets').where({ deposit_id: depositId }).max<{ number: number | null }[]>({ number: 'number' });
      return (largest?.number ?? 0) + 1;
    },
    async insert(row: Omit<CodeSetRow, 'id'>): Promise<number> {
      const [made] = await db<CodeSetRow>('code_sets').insert(row).returning('id');
      return made?.id ?? 0;
    },
  };
}
