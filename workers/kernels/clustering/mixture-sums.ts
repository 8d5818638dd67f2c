import { addCrossProducts } from '#kernels/components/cross-products.ts';
import {
  BLOCK_ROWS,
  blockResponsibilities,
  fillBlock,
  mixtureBlock,
  type MixtureBlock,
} from './mixture-block.ts';
import { isAxial, type MixtureDensity, type MixtureModel } from './mixture-model.ts';
import { packedSize } from './packed-cholesky.ts';

/** Rows EM runs over. */
export interface MixtureRows {
  /** Row-major, shape (n, p). */
  points: Float64Array;
  n: number;
  weights: Float64Array | null;
}

/** Sums of one pass over the rows: what the next shares, means and covariances are made of. */
export interface MixtureSums {
  /** Responsibility per group. */
  mass: Float64Array;
  /** Shape (K, p): Σ r (x - old mean). */
  first: Float64Array;
  /** Shape (K, p (p + 1) / 2): Σ r (x - old mean)(x - old mean)ᵀ; only its diagonal in axial families. */
  second: Float64Array;
  /** Σ w ln density at the old parameters. */
  logLik: number;
}

/** Sums with room for a model. */
export function emptySums(k: number, p: number): MixtureSums {
  return {
    mass: new Float64Array(k),
    first: new Float64Array(k * p),
    second: new Float64Array(k * packedSize(p)),
    logLik: 0,
  };
}

/** One pass: responsibilities of every row under the density, summed for the next parameters. */
export function sumResponsibilities(
  density: MixtureDensity,
  { points, n, weights }: MixtureRows,
  sums: MixtureSums,
): void {
  const { model } = density;
  const { k, p } = model;
  const block = mixtureBlock(k, p);
  const adder = groupAdder(model, block, sums);
  sums.mass.fill(0);
  sums.first.fill(0);
  sums.second.fill(0);
  sums.logLik = 0;
  for (let from = 0; from < n; from += BLOCK_ROWS) {
    const count = Math.min(BLOCK_ROWS, n - from);
    fillBlock(block, points, p, from, count);
    blockResponsibilities(block, density, count);
    let logLik = 0;
    for (let r = 0; r < count; r++) {
      const w = weights ? weights[from + r]! : 1;
      logLik += w * block.logDensity[r]!;
      if (weights)
        for (let at = r; at < block.shares.length; at += BLOCK_ROWS) block.shares[at]! *= w;
    }
    sums.logLik += logLik;
    for (let c = 0; c < k; c++) adder(c, count);
  }
  unpackCross(model, adder.cross, sums);
}

type GroupAdder = ((c: number, count: number) => void) & { cross: Float64Array };

/** Adds the rows of the block to the sums of a group; rows without a share in it cost nothing. */
function groupAdder(model: MixtureModel, block: MixtureBlock, sums: MixtureSums): GroupAdder {
  const { k, p, means, family } = model;
  const { x, shares, deviations } = block;
  const nCols = deviations.length / BLOCK_ROWS;
  const axial = isAxial(family);
  const rows = new Int32Array(BLOCK_ROWS);
  const roots = new Float64Array(BLOCK_ROWS);
  const cross = new Float64Array(axial ? 0 : k * nCols * nCols);
  const crossOf = Array.from({ length: axial ? 0 : k }, (_, c) =>
    cross.subarray(c * nCols * nCols, (c + 1) * nCols * nCols),
  );
  const add = (c: number, count: number): void => {
    const used = sharedRows(shares, c, count, rows, roots, sums);
    for (let j = 0; j < p; j++) {
      const mean = means[c * p + j]!;
      const at = j * BLOCK_ROWS;
      let first = 0;
      let second = 0;
      for (let t = 0; t < used; t++) {
        const root = roots[t]!;
        const scaled = root * (x[at + rows[t]!]! - mean);
        deviations[at + t] = scaled;
        first += root * scaled;
        second += scaled * scaled;
      }
      sums.first[c * p + j]! += first;
      if (axial) sums.second[c * packedSize(p) + packedSize(j + 1) - 1]! += second;
    }
    if (!axial) addCrossProducts(deviations, BLOCK_ROWS, 0, used, nCols, crossOf[c]!);
  };
  return Object.assign(add, { cross });
}

/** Rows of the block with a share in group c, and the square roots of those shares. */
function sharedRows(
  shares: Float64Array,
  c: number,
  count: number,
  rows: Int32Array,
  roots: Float64Array,
  sums: MixtureSums,
): number {
  const at = c * BLOCK_ROWS;
  let used = 0;
  let mass = 0;
  for (let r = 0; r < count; r++) {
    const share = shares[at + r]!;
    if (share === 0) continue;
    mass += share;
    rows[used] = r;
    roots[used++] = Math.sqrt(share);
  }
  sums.mass[c]! += mass;
  return used;
}

/** The upper triangles of padded squares into packed lower triangles. */
function unpackCross({ k, p }: MixtureModel, cross: Float64Array, { second }: MixtureSums): void {
  if (cross.length === 0) return;
  const size = cross.length / k;
  const nCols = Math.sqrt(size);
  for (let c = 0, i = 0; c < k; c++)
    for (let a = 0; a < p; a++)
      for (let b = 0; b <= a; b++) second[i++] = cross[c * size + b * nCols + a]!;
}
