import type { FileCheck, FileMapping } from '#contract/files.ts';
import { readTable, type ReadTableInput } from '#workers/intake/read-table.ts';
import { storeProblems } from '#workers/intake/store-problems.ts';
import { defineTask } from '#workers/task.ts';

export interface CheckFileInput extends ReadTableInput {
  uploadId: number;
}

export interface CheckFileOutput {
  check: FileCheck;
  /** What the rows were read by: one saved meanwhile makes the check worthless. */
  mapping: FileMapping;
}

/** Reads a whole file and lists its row problems; loads nothing. */
export default defineTask<CheckFileInput, CheckFileOutput>(async (input, { report, store }) => {
  report('read rows', 0);
  const { check, problems } = await readTable(store(), input, (share) => report('read rows', 0.95 * share));
  report('list problems', 0.97);
  storeProblems(store().db, input.uploadId, problems.listed);
  return { check, mapping: input.mapping };
});
