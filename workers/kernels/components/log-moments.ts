import { KernelError } from '#kernels/kernel-error.ts';
import type { OnProgress } from '#kernels/progress.ts';
import { requireColumns } from '#kernels/compositions/require-parts.ts';
import { f64Bytes, withLab, type Lab } from '#kernels/dense/lab.ts';
import { columnsByFour } from '#kernels/dense/dense-math.ts';
import { BLOCK_ROWS, emptyLogBlock, fillLogBlock, logBlockBytes, type LogBlock } from './log-block.ts';

/** Means and centred cross products of ln x over some rows. */
export interface LogMoments {
  nRows: number;
  nParts: number;
  mean: Float64Array;
  /** Sum of products of deviations, row-major (nParts, nParts), symmetric. */
  cross: Float64Array;
}

export interface MomentOptions {
  /** Rows to use: those with a value other than 0; all when left out. */
  mask?: Uint8Array;
  onProgress?: OnProgress;
}

/** Rows of a span: fixed, so that sums do not depend on how many threads share the spans. */
export const SPAN_ROWS = 65_536;
/** Rows between reports of progress. */
const CHUNK_ROWS = 4096;

/**
 * Moments of the logs of a table, straight from its columns; the table is never copied. Partial sums
 * of fixed spans are combined in order: threads that do spans apart get the same answer to the bit.
 *
 * @param columns One array per part (ppm), values > 0 in used rows; shared memory is fine.
 * @throws {KernelError} `too-few-parts`, `shape`; `not-positive` with { row, col }.
 */
export function logMoments(
  columns: readonly Float64Array[],
  options: MomentOptions = {},
): LogMoments {
  const { onProgress } = options;
  const spans = Math.ceil(requireColumns(columns) / SPAN_ROWS);
  const parts: LogMoments[] = [];
  for (let span = 0; span < spans; span++) {
    const onSpan = onProgress && ((share: number) => onProgress((span + share) / spans));
    parts.push(logMomentsOfSpan(columns, span, { ...options, onProgress: onSpan }));
  }
  return combineLogMoments(columns.length, parts);
}

/** {@link logMoments} of the span of `SPAN_ROWS` rows with a number. */
export function logMomentsOfSpan(
  columns: readonly Float64Array[],
  span: number,
  { mask, onProgress }: { mask?: Uint8Array | undefined; onProgress?: OnProgress | undefined } = {},
): LogMoments {
  const nRows = requireColumns(columns);
  if (mask && mask.length !== nRows) {
    throw new KernelError('shape', `expected a mask of ${nRows} rows, found ${mask.length}`);
  }
  const [from, to] = [span * SPAN_ROWS, Math.min((span + 1) * SPAN_ROWS, nRows)];
  const nParts = columns.length;
  const padded = columnsByFour(nParts);
  return withLab(logBlockBytes(nParts) + f64Bytes(padded * padded, nParts), (lab) => {
    const room = chunkRoom(lab, nParts);
    const total = emptyMoments(nParts);
    for (let row = from; row < to; row += CHUNK_ROWS) {
      onProgress?.((row - from) / (to - from));
      const end = Math.min(row + CHUNK_ROWS, to);
      addMoments(total, momentsOfChunk(columns, mask ?? null, row, end, room));
    }
    return total;
  });
}

/** Moments of several disjoint sets of rows together, added in the order given. */
export function combineLogMoments(nParts: number, parts: readonly LogMoments[]): LogMoments {
  const total = emptyMoments(nParts);
  for (const part of parts) addMoments(total, part);
  return total;
}

function emptyMoments(nParts: number): LogMoments {
  return {
    nRows: 0,
    nParts,
    mean: new Float64Array(nParts),
    cross: new Float64Array(nParts * nParts),
  };
}

/** Chan's update: cross += cross_b + (n_a n_b / n) d d', with d the difference of the means. */
function addMoments(total: LogMoments, { nRows, nParts, mean, cross }: LogMoments): void {
  if (nRows === 0) return;
  const sum = total.nRows + nRows;
  const weight = (total.nRows / sum) * nRows;
  const difference = mean.map((value, part) => value - total.mean[part]!);
  for (let i = 0; i < nParts; i++) {
    for (let j = 0; j < nParts; j++) {
      total.cross[i * nParts + j]! +=
        cross[i * nParts + j]! + weight * difference[i]! * difference[j]!;
    }
  }
  for (let i = 0; i < nParts; i++) total.mean[i]! += (nRows / sum) * difference[i]!;
  total.nRows = sum;
}

/** What the sums of a chunk are made in. */
interface ChunkRoom {
  block: LogBlock;
  cross: Float64Array;
  sums: Float64Array;
}

function chunkRoom(lab: Lab, nParts: number): ChunkRoom {
  return {
    block: emptyLogBlock(lab, nParts),
    cross: lab.f64(columnsByFour(nParts) ** 2),
    sums: lab.f64(nParts),
  };
}

/** Sums of logs less those of the chunk's first used row, so that little cancels. */
function momentsOfChunk(
  columns: readonly Float64Array[],
  mask: Uint8Array | null,
  from: number,
  to: number,
  { block, cross, sums }: ChunkRoom,
): LogMoments {
  const nParts = columns.length;
  const padded = columnsByFour(nParts);
  const moments = emptyMoments(nParts);
  const first = mask ? mask.subarray(from, to).findIndex((use) => use !== 0) + from : from;
  if (first < from) return moments;
  const { shift, logs, math } = block;
  for (let part = 0; part < nParts; part++) shift[part] = Math.log(columns[part]![first]!);
  cross.fill(0);
  sums.fill(0);
  for (let row = first; row < to;) {
    row = fillLogBlock(columns, mask, row, to, block);
    math.addCrossProducts(logs, BLOCK_ROWS, block.count, padded, cross);
    math.addColumnSums(logs, BLOCK_ROWS, block.count, nParts, sums);
    moments.nRows += block.count;
  }
  for (let i = 0; i < nParts; i++) {
    moments.mean[i] = shift[i]! + sums[i]! / moments.nRows;
    for (let j = i; j < nParts; j++) {
      const value = cross[i * padded + j]! - (sums[i]! * sums[j]!) / moments.nRows;
      moments.cross[i * nParts + j] = value;
      moments.cross[j * nParts + i] = value;
    }
  }
  return moments;
}

/**
 * Covariance (n - 1) of ln x, row-major.
 *
 * @throws {KernelError} `too-few-rows` under two rows.
 */
export function logCovariance({ cross, nRows }: LogMoments): Float64Array {
  if (nRows < 2) throw new KernelError('too-few-rows', `expected at least 2 rows, found ${nRows}`, { found: nRows });
  return cross.map((value) => value / (nRows - 1));
}

/** Covariance of clr from that of ln: centred by rows and columns, H S H. Row-major. */
export function clrCovariance(covariance: Float64Array, nParts: number): Float64Array {
  const rowMeans = new Float64Array(nParts);
  for (let i = 0; i < nParts; i++) {
    for (let j = 0; j < nParts; j++) rowMeans[i]! += covariance[i * nParts + j]! / nParts;
  }
  const mean = rowMeans.reduce((sum, value) => sum + value, 0) / nParts;
  return covariance.map((value, at) => {
    const [i, j] = [Math.floor(at / nParts), at % nParts];
    return value - rowMeans[i]! - rowMeans[j]! + mean;
  });
}

/** Correlation from a covariance; null when a variable does not vary. Row-major. */
export function correlationOf(covariance: Float64Array, nParts: number): Float64Array | null {
  const sds = Float64Array.from({ length: nParts }, (_, i) =>
    Math.sqrt(covariance[i * nParts + i]!),
  );
  if (!sds.every((sd) => sd > 0)) return null;
  return covariance.map((value, at) => value / (sds[Math.floor(at / nParts)]! * sds[at % nParts]!));
}
