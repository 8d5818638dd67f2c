import type { Revision, Upload } from '#contract/files.ts';
import { countOf, formatCount } from '#src/lib/format.ts';
import { openColumns } from './certainty.ts';
import { kindOrder, KIND_NAMES } from './kinds.ts';
import { mappingProblems } from './mapping.ts';

export interface PlannedLoad {
  upload: Upload;
  mode: 'replace' | 'add';
  /** What the load does to the table in force. */
  effect: string;
}

export const isWaiting = ({ state }: Upload): boolean => state !== 'loaded';

export const revisionInForce = (revisions: readonly Revision[], kind: Revision['kind']): Revision | undefined =>
  revisions.find((revision) => revision.kind === kind && revision.isCurrent);

/**
 * Waiting files in the order their tables depend on each other, older files first: the first of a
 * kind replaces the table in force, the others are added to it.
 */
export function planLoads(uploads: readonly Upload[], revisions: readonly Revision[]): PlannedLoad[] {
  const ordered = uploads.filter(isWaiting).sort((a, b) => kindOrder(a.mapping.kind) - kindOrder(b.mapping.kind) || a.id - b.id);
  return ordered.map((upload, index) => {
    const { kind } = upload.mapping;
    const before = ordered.slice(0, index).findLast((other) => other.mapping.kind === kind);
    if (before) return { upload, mode: 'add', effect: `added to ${before.fileName}` };
    const current = revisionInForce(revisions, kind);
    const effect = current ? `replaces revision ${current.number}, ${countOf(current.rows, 'row')}` : `first table of ${KIND_NAMES[kind]}`;
    return { upload, mode: 'replace', effect };
  });
}

/** Why a file cannot be loaded as it is guessed; null when it can. */
export function attentionOf(upload: Upload): string | null {
  const [problem] = mappingProblems(upload.mapping);
  if (problem) {
    const header = upload.mapping.columns.find(({ index }) => index === problem.index)?.header;
    return header === undefined ? problem.message : `${header}: ${problem.message}`;
  }
  const doubtful = openColumns(upload).filter(({ role }) => role === 'analyte');
  if (doubtful.length > 0) return `${formatCount(doubtful.length)} ${doubtful.length === 1 ? 'analyte' : 'analytes'} to look at: ${doubtful.slice(0, 3).map(({ header }) => header).join(', ')}`;
  return upload.check?.rowsToLoad === 0 ? 'no row holds' : null;
}
