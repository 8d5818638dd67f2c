import { KernelError } from '#kernels/kernel-error.ts';
import { requireColumns } from '#kernels/compositions/require-parts.ts';
import type { Components } from './components.ts';
import { f64Bytes, withLab, type Lab } from '#kernels/dense/lab.ts';
import { columnsByFour } from '#kernels/dense/dense-math.ts';
import { BLOCK_ROWS, emptyLogBlock, fillLogBlock, logBlockBytes, type LogBlock } from './log-block.ts';
import type { OnProgress } from '#kernels/progress.ts';

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
  const nParts = columns.length;
  const outputs = columnsByFour(k);
  withLab(logBlockBytes(nParts) + f64Bytes(outputs * nParts, outputs * BLOCK_ROWS), (lab) => {
    const block = emptyLogBlock(lab, nParts);
    block.shift.set(components.logMean);
    const table = scoreTable(lab, components, k);
    const projected = lab.f64(outputs * BLOCK_ROWS);
    let reported = from;
    for (let row = from; row < to;) {
      if (row >= reported) {
        onProgress?.((row - from) / (to - from));
        reported = row + REPORT_ROWS;
      }
      const next = fillLogBlock(columns, mask, row, to, block);
      if (options.out && mask) for (const score of scores) score.fill(NaN, row, next);
      block.math.project(block.logs, BLOCK_ROWS, block.count, nParts, table, outputs, projected);
      spread(projected, block, row, next, scores);
      row = next;
    }
  });
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
function scoreTable(lab: Lab, { weights, eigenvalues, nParts }: Components, k: number): Float64Array {
  const table = lab.f64(columnsByFour(k) * nParts);
  for (let component = 0; component < k; component++) {
    const group = (component >> 2) * 4 * nParts;
    for (let part = 0; part < nParts; part++) {
      table[group + 4 * part + (component & 3)] = weights[part * eigenvalues.length + component]!;
    }
  }
  return table;
}

/** Scores of a block to their rows. */
function spread(
  projected: Float64Array,
  { rows, count }: LogBlock,
  from: number,
  to: number,
  scores: readonly Float64Array[],
): void {
  const isWhole = count === to - from;
  for (const [component, score] of scores.entries()) {
    const at = component * BLOCK_ROWS;
    if (isWhole) score.set(projected.subarray(at, at + count), from);
    else for (let i = 0; i < count; i++) score[rows[i]!] = projected[at + i]!;
  }
}
