import type { PreviewRow } from '#contract/files.ts';
import { previewFile, type PreviewInput } from '#workers/intake/preview.ts';
import { defineTask } from '#workers/task.ts';

export interface PreviewFileInput extends Pick<PreviewInput, 'path' | 'encoding' | 'mapping' | 'rows'> {
  collarTableId: number | null;
}

/** The first rows of a file as a mapping reads them. */
export default defineTask<PreviewFileInput, PreviewRow[]>(async ({ collarTableId, ...file }, { store }) => {
  if (collarTableId === null) return previewFile({ ...file, collarNames: null, collarLengths: [] });
  const { codes, dictionary } = store().readCategory(collarTableId, 'hole');
  const collarNames = Array.from(codes, (code) => dictionary[code] ?? '');
  return previewFile({ ...file, collarNames, collarLengths: [...store().readNumbers(collarTableId, 'length')] });
});
