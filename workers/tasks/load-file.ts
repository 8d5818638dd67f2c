import type { FileCheck } from '#contract/files.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { writeDraft } from '#workers/intake/draft-tables.ts';
import { readTable, type ReadTableInput } from '#workers/intake/read-table.ts';
import { storeProblems } from '#workers/intake/store-problems.ts';
import { defineTask } from '#workers/task.ts';

export interface LoadFileInput extends ReadTableInput {
  depositId: number;
  uploadId: number;
  jobId: number;
}

export interface LoadFileOutput {
  tableId: number;
  rows: number;
  rowsAdded: number;
  check: FileCheck;
}

/**
 * Loads the rows of a file that hold as a new pending table; the others stay listed with the upload.
 * Cancel: between reading and each stage of writing.
 */
export default defineTask<LoadFileInput, LoadFileOutput>(async (input, { report, store }) => {
  report('read rows', 0);
  const { draft, order, rowsAdded, check, problems } = await readTable(store(), input, (share) => report('read rows', 0.7 * share));
  if (rowsAdded === 0) {
    storeProblems(store().db, input.uploadId, problems.listed);
    throw new KernelError('no-rows-to-load', `expected at least one row that holds, found none among ${check.rows}; see the listed problems`);
  }
  report('write columns', 0.75);
  const { depositId, jobId, uploadId } = input;
  const tableId = store().createTable({ depositId, nRows: order.length, purpose: `${input.mapping.kind} table`, jobId });
  writeDraft(store(), tableId, draft, order);
  report('list problems', 0.97);
  storeProblems(store().db, uploadId, problems.listed);
  return { tableId, rows: order.length, rowsAdded, check };
});
