import type { Database } from 'better-sqlite3';
import type { FoundProblem } from './problem-list.ts';

const BATCH = 1000;

/** Replaces the listed problems of an upload, in short transactions. */
export function storeProblems(db: Database, uploadId: number, problems: readonly FoundProblem[]): void {
  const remove = db.prepare('DELETE FROM row_problems WHERE id IN (SELECT id FROM row_problems WHERE upload_id = ? LIMIT 5000)');
  while (remove.run(uploadId).changes > 0);
  const insert = db.prepare(
    'INSERT INTO row_problems (upload_id, row, "column", value, code, message, severity, original) VALUES (?, ?, ?, ?, ?, ?, ?, ?)',
  );
  const writeBatch = db.transaction((batch: readonly FoundProblem[]) => {
    for (const { row, column, value, code, message, severity, original } of batch) {
      insert.run(uploadId, row, column, value, code, message, severity, original);
    }
  });
  const inRowOrder = [...problems].sort((a, b) => a.row - b.row);
  for (let start = 0; start < inRowOrder.length; start += BATCH) writeBatch(inRowOrder.slice(start, start + BATCH));
}
