import { inspectFile, type Inspection } from '#workers/intake/inspect.ts';
import { eachRow } from '#workers/intake/csv-rows.ts';
import { defineTask } from '#workers/task.ts';

export interface InspectFileInput {
  path: string;
  fileName: string;
  sizeBytes: number;
}

export interface InspectFileOutput extends Inspection {
  rowCount: number;
}

/** Guesses what a file holds from its head, then counts its rows. */
export default defineTask<InspectFileInput, InspectFileOutput>(async ({ path, fileName, sizeBytes }, { report }) => {
  report('look at the columns', 0);
  const inspection = await inspectFile(path, fileName, sizeBytes);
  let rowCount = 0;
  await eachRow({ path, delimiter: inspection.mapping.delimiter, encoding: inspection.encoding }, (row, cells) => {
    if (row > 1 && (cells.length > 1 || cells[0]?.trim() !== '')) rowCount += 1;
  }, (share) => report('count rows', share));
  return { ...inspection, rowCount };
});
