import { KernelError } from '#kernels/kernel-error.ts';
import { requireColumns } from '#kernels/compositions/require-parts.ts';
import type { Components } from './components.ts';
import {
  BLOCK_ROWS,
  emptyLogBlock,
  fillLogBlock,
  paddedParts,
  partColumns,
  type LogBlock,
} from './log-block.ts';
import type { OnProgress } from './log-moments.ts';

export interface ScoreOptions {
  /** Rows to score: those with a value other than 0; all when left out. */
  mask?: Uint8Array;
  /** Where to write, one array per component (for shared memory); new arrays unless given. */
  out?: readonly Float64Array[];
  /** Rows [from, to) to score, all unless given: threads may share a table. */
  from?: number;
  to?: number;
  onProgress?: OnProgress;
}

/** Rows between reports of progress. */
const REPORT_ROWS = 4096;

/**
 * Scores of the first components, straight from the columns in blocks.
 *
 * @param columns The parts the components were fitted on, in that order; > 0 in scored rows.
 * @param k Components to score, 1 up to those that exist.
 * @returns One array per component, one score per row; NaN in rows that are not scored.
 * @throws {KernelError} `shape`; `bad-parameter` for k or the rows; `not-positive` with { row, col }.
 */
export function scoreComponents(
  columns: readonly Float64Array[],
  components: Components,
  k: number,
  options: ScoreOptions = {},
): Float64Array[] {
  const nRows = requireColumns(columns);
  const { mask = null, from = 0, to = nRows, onProgress } = options;
  const scores = options.out ?? Array.from({ length: k }, () => new Float64Array(nRows).fill(NaN));
  requireScoring(columns, components, k, nRows, { scores, mask, from, to });
  const views = partColumns(columns);
  const block = emptyLogBlock(columns.length);
  const table = scoreTable(components, k);
  let reported = from;
  for (let row = from; row < to;) {
    if (row >= reported) {
      onProgress?.((row - from) / (to - from));
      reported = row + REPORT_ROWS;
    }
    const next = fillLogBlock(views, mask, row, to, components.logMean, block);
    if (options.out && mask) for (const score of scores) score.fill(NaN, row, next);
    for (let first = 0; first < k; first += 4)
      scoreFour(block, table, columns.length, k, first, scores);
    row = next;
  }
  return [...scores];
}

function requireScoring(
  columns: readonly Float64Array[],
  { nParts, eigenvalues }: Components,
  k: number,
  nRows: number,
  {
    scores,
    mask,
    from,
    to,
  }: { scores: readonly Float64Array[]; mask: Uint8Array | null; from: number; to: number },
): void {
  if (columns.length !== nParts) {
    throw new KernelError('shape', `expected ${nParts} parts, found ${columns.length}`);
  }
  if (!Number.isInteger(k) || k < 1 || k > eigenvalues.length) {
    const message = `expected 1 to ${eigenvalues.length} components, found ${k}`;
    throw new KernelError('bad-parameter', message);
  }
  if (!(from >= 0 && from <= to && to <= nRows)) {
    throw new KernelError(
      'bad-parameter',
      `expected rows within 0 to ${nRows}, found ${from} to ${to}`,
    );
  }
  if (scores.length !== k || scores.some((score) => score.length !== nRows)) {
    throw new KernelError('shape', `expected ${k} places of ${nRows} scores`);
  }
  if (mask && mask.length !== nRows) {
    throw new KernelError('shape', `expected a mask of ${nRows} rows, found ${mask.length}`);
  }
}

/** Weights of the first k components, four after four: a group's four stand together per part. */
function scoreTable({ weights, eigenvalues, nParts }: Components, k: number): Float64Array {
  const padded = paddedParts(k);
  const table = new Float64Array(padded * nParts);
  for (let component = 0; component < k; component++) {
    const group = (component >> 2) * 4 * nParts;
    for (let part = 0; part < nParts; part++) {
      table[group + 4 * part + (component & 3)] = weights[part * eigenvalues.length + component]!;
    }
  }
  return table;
}

/** Scores of four components for a block, four rows at a time; rows past the count are not kept. */
function scoreFour(
  { logs, rows, count }: LogBlock,
  table: Float64Array,
  nParts: number,
  k: number,
  first: number,
  scores: readonly Float64Array[],
): void {
  const group = first * nParts;
  const kept = Math.min(4, k - first);
  const tile = new Float64Array(16);
  for (let i = 0; i < count; i += 4) {
    let a0 = 0,
      a1 = 0,
      a2 = 0,
      a3 = 0;
    let b0 = 0,
      b1 = 0,
      b2 = 0,
      b3 = 0;
    let c0 = 0,
      c1 = 0,
      c2 = 0,
      c3 = 0;
    let d0 = 0,
      d1 = 0,
      d2 = 0,
      d3 = 0;
    for (let part = 0; part < nParts; part++) {
      const at = part * BLOCK_ROWS + i;
      const w = group + 4 * part;
      const w0 = table[w]!;
      const w1 = table[w + 1]!;
      const w2 = table[w + 2]!;
      const w3 = table[w + 3]!;
      let value = logs[at]!;
      a0 += value * w0;
      a1 += value * w1;
      a2 += value * w2;
      a3 += value * w3;
      value = logs[at + 1]!;
      b0 += value * w0;
      b1 += value * w1;
      b2 += value * w2;
      b3 += value * w3;
      value = logs[at + 2]!;
      c0 += value * w0;
      c1 += value * w1;
      c2 += value * w2;
      c3 += value * w3;
      value = logs[at + 3]!;
      d0 += value * w0;
      d1 += value * w1;
      d2 += value * w2;
      d3 += value * w3;
    }
    setFour(tile, 0, a0, a1, a2, a3);
    setFour(tile, 4, b0, b1, b2, b3);
    setFour(tile, 8, c0, c1, c2, c3);
    setFour(tile, 12, d0, d1, d2, d3);
    const last = Math.min(4, count - i);
    for (let component = 0; component < kept; component++) {
      const score = scores[first + component]!;
      for (let r = 0; r < last; r++) score[rows[i + r]!] = tile[4 * r + component]!;
    }
  }
}

function setFour(tile: Float64Array, at: number, a: number, b: number, c: number, d: number): void {
  tile[at] = a;
  tile[at + 1] = b;
  tile[at + 2] = c;
  tile[at + 3] = d;
}
