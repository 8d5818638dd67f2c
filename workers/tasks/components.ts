import type { ComponentRun } from '#contract/components.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { brokenStick, suggestCount } from '#kernels/components/component-count.ts';
import { fitComponents, type Components } from '#kernels/components/components.ts';
import { mineralReading } from '#kernels/components/mineral-reading.ts';
import { parallelAnalysis } from '#kernels/components/parallel-analysis.ts';
import { scoreComponents } from '#kernels/components/scores.ts';
import { ROW_USE } from '#kernels/compositions/row-use.ts';
import { componentNames } from '#workers/frame/component-names.ts';
import { readParts, type PartColumns } from '#workers/frame/parts.ts';
import { overFrame, type SnapshotTables, type Support } from '#workers/frame/snapshot-tables.ts';
import { defineTask } from '#workers/task.ts';

export interface ComponentsInput {
  depositId: number;
  jobId: number;
  tables: SnapshotTables;
  support: Support;
  analytes: string[];
  replacementFraction: number;
  seed: number;
}

export interface ComponentsOutput {
  tableId: number;
  result: Pick<
    ComponentRun,
    | 'parts' | 'support' | 'nFit' | 'nScoredOnly' | 'nLeftOut' | 'replacedShare' | 'replacementFraction' | 'eigenvalues' | 'shares' | 'loadings'
    | 'brokenStick' | 'parallel95' | 'suggested' | 'suggestion' | 'readings' | 'stored' | 'notes'
  >;
}

/** Scores kept for plots and groups. */
const MOST_STORED = 12;
/** Permutations are done on this many rows at most: the eigenvalues of noise need no more. */
const PARALLEL_ROWS = 5000;

const rowsWith = (use: Uint8Array, wanted: (value: number) => boolean): Uint8Array => use.map((value) => (wanted(value) ? 1 : 0));

function refuseTooFew({ nFit, nLeftOut, nScoredOnly }: PartColumns, parts: number): void {
  if (nFit > parts) return;
  throw new KernelError('too-few-rows', `expected more than ${parts} rows with all ${parts} analytes, found ${nFit}: ${nLeftOut} miss one, ${nScoredOnly} are mostly below detection`);
}

function loadingsOf({ loadings, eigenvalues, nParts }: Components, stored: number): number[][] {
  return Array.from({ length: nParts }, (_, part) => Array.from(loadings.subarray(part * eigenvalues.length, part * eigenvalues.length + stored)));
}

function notesOf(fitted: Components, { notes, nScoredOnly, nLeftOut }: PartColumns): string[] {
  const rows: string[] = [];
  if (nLeftOut > 0) rows.push(`${nLeftOut} rows miss an analyte of the suite: they have no scores.`);
  if (nScoredOnly > 0) rows.push(`${nScoredOnly} rows have more than 30 % of their analytes below detection: scored, but not used in the fit.`);
  return [...rows, ...fitted.notes, ...notes];
}

/** Log-ratio PCA of a suite: replaces values below detection, fits, counts components, keeps scores. */
export default defineTask<ComponentsInput, ComponentsOutput>((input, { report, store }) => {
  const { depositId, jobId, tables, support, analytes, replacementFraction, seed } = input;
  const parts = readParts(store(), { tables, support, parts: analytes, replacementFraction }, (share) => report('read analytes', 0.3 * share));
  refuseTooFew(parts, analytes.length);
  const fitMask = rowsWith(parts.use, (value) => value === ROW_USE.fit);
  const fitted = fitComponents(parts.columns, { mask: fitMask, onProgress: (share) => report('fit', 0.3 + 0.2 * share) });
  const parallel = parallelAnalysis(parts.columns, { seed, mask: fitMask, maxRows: PARALLEL_ROWS, onProgress: (share) => report('compare with independent columns', 0.5 + 0.3 * share) });
  const count = suggestCount(fitted.shares, parallel.kept);
  const stored = Math.min(MOST_STORED, fitted.eigenvalues.length);
  const scoreMask = rowsWith(parts.use, (value) => value !== ROW_USE.leftOut);
  const scores = scoreComponents(parts.columns, fitted, stored, { mask: scoreMask, onProgress: (share) => report('score', 0.8 + 0.1 * share) });
  report('write scores', 0.9);
  const tableId = store().createTable({ depositId, nRows: tables.rows, purpose: 'component scores', jobId });
  componentNames(stored).forEach((name, i) => store().writeNumbers(tableId, { name }, overFrame(scores[i] ?? new Float64Array(0), tables, support)));
  return {
    tableId,
    result: {
      parts: analytes, support, nFit: parts.nFit, nScoredOnly: parts.nScoredOnly, nLeftOut: parts.nLeftOut, replacedShare: parts.replacedShare, replacementFraction,
      eigenvalues: Array.from(fitted.eigenvalues), shares: Array.from(fitted.shares), loadings: loadingsOf(fitted, stored),
      brokenStick: brokenStick(fitted.eigenvalues.length), parallel95: parallel.null95Shares, suggested: count.suggested, suggestion: count.sentence,
      readings: Array.from({ length: stored }, (_, i) => mineralReading(fitted, analytes, i + 1)), stored, notes: notesOf(fitted, parts),
    },
  };
});
