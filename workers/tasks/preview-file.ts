import type { FileMapping, PreviewRow } from '#contract/files.ts';
import { previewFile } from '#workers/intake/preview.ts';
import { defineTask } from '#workers/task.ts';

export interface PreviewFileInput {
  path: string;
  mapping: FileMapping;
  rows: number;
  collarTableId: number | null;
}

/** The first rows of a file as a mapping reads them. */
export default defineTask<PreviewFileInput, PreviewRow[]>(async ({ path, mapping, rows, collarTableId }, { store }) => {
  if (collarTableId === null) return previewFile({ path, mapping, rows, collarNames: null, collarLengths: [] });
  const { codes, dictionary } = store().readCategory(collarTableId, 'hole');
  const collarNames = Array.from(codes, (code) => dictionary[code] ?? '');
  return previewFile({ path, mapping, rows, collarNames, collarLengths: [...store().readNumbers(collarTableId, 'length')] });
});
