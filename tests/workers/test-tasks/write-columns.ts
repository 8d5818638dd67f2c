import { defineTask } from '#workers/task.ts';

export interface WriteColumnsInput {
  jobId: number | null;
  nRows: number;
  nColumns: number;
}

/** Writes a pending table of many columns. */
export default defineTask<WriteColumnsInput, { tableId: number }>(({ jobId, nRows, nColumns }, { report, store }) => {
  const columns = store();
  const tableId = columns.createTable({ depositId: 1, nRows, purpose: 'written by a test', jobId });
  for (let column = 0; column < nColumns; column++) {
    report('write', column / nColumns);
    columns.writeNumbers(tableId, { name: `column ${column}` }, new Float64Array(nRows).fill(column));
  }
  return { tableId };
});
