import { expOfNegative } from '#kernels/exp.ts';
import { isAxial, type MixtureDensity } from './mixture-model.ts';
import { packedSize } from './packed-cholesky.ts';

/** Rows worked on together, so that every inner loop runs over rows and everything stays in cache. */
export const BLOCK_ROWS = 256;

/** A block of rows, column by column with `BLOCK_ROWS` places each, and room to work. */
export interface MixtureBlock {
  /** Coordinates, p columns. */
  x: Float64Array;
  /** Shape (K, BLOCK_ROWS): probability of each group per row once `blockResponsibilities` ran. */
  shares: Float64Array;
  /** ln density per row. */
  logDensity: Float64Array;
  /** Room: deviations (p rounded up to 4 columns, the rest zero), squares, sums. */
  deviations: Float64Array;
  squares: Float64Array;
  partial: Float64Array;
}

/** A block for models of K groups and p coordinates. */
export function mixtureBlock(k: number, p: number): MixtureBlock {
  const column = () => new Float64Array(BLOCK_ROWS);
  return {
    x: new Float64Array(p * BLOCK_ROWS),
    shares: new Float64Array(k * BLOCK_ROWS),
    logDensity: column(),
    deviations: new Float64Array(4 * Math.ceil(p / 4) * BLOCK_ROWS),
    squares: column(),
    partial: column(),
  };
}

/** Copies `count` rows from row `from` of a row-major table into the block. */
export function fillBlock(
  { x }: MixtureBlock,
  points: Float64Array,
  p: number,
  from: number,
  count: number,
): void {
  for (let r = 0, at = from * p; r < count; r++)
    for (let j = 0; j < p; j++) x[j * BLOCK_ROWS + r] = points[at++]!;
}

/** ln of a density ratio too small to change a sum of doubles. */
const NEGLIGIBLE = -37;

/**
 * Responsibilities and ln density of the first `count` rows of the block; a group more than e^37
 * times less likely than the likeliest gets exactly 0.
 */
export function blockResponsibilities(
  block: MixtureBlock,
  density: MixtureDensity,
  count: number,
): void {
  const { k } = density.model;
  const { shares, squares, logDensity } = block;
  const squared = isAxial(density.model.family) ? axialSquares : ellipsoidSquares;
  logDensity.fill(-Infinity);
  for (let c = 0, at = 0; c < k; c++, at += BLOCK_ROWS) {
    const scale = density.logScales[c]!;
    squared(block, density, c, count);
    for (let r = 0; r < count; r++) {
      const log = scale - 0.5 * squares[r]!;
      shares[at + r] = log;
      if (log > logDensity[r]!) logDensity[r] = log;
    }
  }
  shareOut(block, k, count);
}

/** ln densities per group into shares of 1, and their sum into `logDensity` (which holds the largest). */
function shareOut({ shares, logDensity, partial }: MixtureBlock, k: number, count: number): void {
  const end = k * BLOCK_ROWS;
  partial.fill(0);
  for (let at = 0; at < end; at += BLOCK_ROWS) {
    for (let r = 0; r < count; r++) {
      const less = shares[at + r]! - logDensity[r]!;
      const share = less === 0 ? 1 : less < NEGLIGIBLE ? 0 : expOfNegative(less);
      shares[at + r] = share;
      partial[r]! += share;
    }
  }
  for (let r = 0; r < count; r++) {
    logDensity[r]! += Math.log(partial[r]!);
    partial[r] = 1 / partial[r]!;
  }
  for (let at = 0; at < end; at += BLOCK_ROWS)
    for (let r = 0; r < count; r++) shares[at + r]! *= partial[r]!;
}

/** Squared Mahalanobis distances to group c into `squares`. */
function ellipsoidSquares(
  block: MixtureBlock,
  density: MixtureDensity,
  c: number,
  count: number,
): void {
  const { p, means } = density.model;
  const { x, deviations, squares } = block;
  for (let j = 0; j < p; j++) {
    const mean = means[c * p + j]!;
    const at = j * BLOCK_ROWS;
    for (let r = 0; r < count; r++) deviations[at + r] = x[at + r]! - mean;
  }
  squares.fill(0);
  for (let a = 0, row = c * packedSize(p); a < p; row += ++a)
    addSquare(block, density.whiteners, row, a, count);
}

/** Adds the square of one whitened coordinate, Σ_b≤a w_b d_b, four columns at a time. */
function addSquare(
  block: MixtureBlock,
  whiteners: Float64Array,
  row: number,
  a: number,
  count: number,
): void {
  const { deviations, squares, partial } = block;
  const last = a - (a % 4);
  for (let b = 0; b < last; b += 4) addFour(block, whiteners, row, b, count);
  const w0 = whiteners[row + last]!;
  const w1 = last + 1 <= a ? whiteners[row + last + 1]! : 0;
  const w2 = last + 2 <= a ? whiteners[row + last + 2]! : 0;
  const w3 = last + 3 <= a ? whiteners[row + last + 3]! : 0;
  const [d0, d1, d2, d3] = columnsAt(last);
  const carries = last > 0;
  for (let r = 0; r < count; r++) {
    let sum =
      w0 * deviations[d0 + r]! +
      w1 * deviations[d1 + r]! +
      w2 * deviations[d2 + r]! +
      w3 * deviations[d3 + r]!;
    if (carries) sum += partial[r]!;
    squares[r]! += sum * sum;
  }
}

/** Four whole columns of the sum of `addSquare` into `partial`; the first four start it afresh. */
function addFour(
  { deviations, partial }: MixtureBlock,
  whiteners: Float64Array,
  row: number,
  b: number,
  count: number,
): void {
  const w0 = whiteners[row + b]!;
  const w1 = whiteners[row + b + 1]!;
  const w2 = whiteners[row + b + 2]!;
  const w3 = whiteners[row + b + 3]!;
  const [d0, d1, d2, d3] = columnsAt(b);
  const isFirst = b === 0;
  for (let r = 0; r < count; r++) {
    const sum =
      w0 * deviations[d0 + r]! +
      w1 * deviations[d1 + r]! +
      w2 * deviations[d2 + r]! +
      w3 * deviations[d3 + r]!;
    partial[r] = isFirst ? sum : partial[r]! + sum;
  }
}

const columnsAt = (b: number): readonly [number, number, number, number] => [
  b * BLOCK_ROWS,
  (b + 1) * BLOCK_ROWS,
  (b + 2) * BLOCK_ROWS,
  (b + 3) * BLOCK_ROWS,
];

/** The same with a diagonal covariance. */
function axialSquares(
  block: MixtureBlock,
  density: MixtureDensity,
  c: number,
  count: number,
): void {
  const { p, means } = density.model;
  const { x, squares } = block;
  squares.fill(0);
  for (let j = 0, w = c * packedSize(p); j < p; j++, w += j + 1) {
    const mean = means[c * p + j]!;
    const white = density.whiteners[w]!;
    const at = j * BLOCK_ROWS;
    for (let r = 0; r < count; r++) {
      const z = (x[at + r]! - mean) * white;
      squares[r]! += z * z;
    }
  }
}
