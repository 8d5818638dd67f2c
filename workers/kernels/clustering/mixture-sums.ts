import { f64Bytes, withLab } from '#kernels/dense/lab.ts';
import { columnsByFour, type MixtureMoments } from '#kernels/dense/dense-math.ts';
import { BLOCK_ROWS, densityTables, fillBlock, mixtureBlock, mixtureBlockBytes } from './mixture-block.ts';
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
  const { k, p, family } = density.model;
  const nCols = columnsByFour(p);
  const momentBytes = f64Bytes(k * p, k * p, k * nCols * nCols);
  withLab(mixtureBlockBytes(k, p) + momentBytes, (lab) => {
    const { math } = lab;
    const block = mixtureBlock(lab, k, p);
    const tables = densityTables(lab, density);
    const moments: MixtureMoments = {
      first: lab.f64(k * p),
      squares: lab.f64(k * p),
      cross: isAxial(family) ? null : lab.f64(k * nCols * nCols),
      nCols,
    };
    sums.mass.fill(0);
    sums.logLik = 0;
    for (let from = 0; from < n; from += BLOCK_ROWS) {
      const count = Math.min(BLOCK_ROWS, n - from);
      fillBlock(block, points, from, count);
      math.mixtureShares(block, count, tables);
      let logLik = 0;
      for (let r = 0; r < count; r++) {
        const w = weights ? weights[from + r]! : 1;
        logLik += w * block.logDensity[r]!;
        if (weights)
          for (let at = r; at < block.shares.length; at += BLOCK_ROWS) block.shares[at]! *= w;
      }
      sums.logLik += logLik;
      for (let c = 0; c < k; c++) sums.mass[c]! += math.addGroupMoments(block, count, c, tables, moments);
    }
    sums.first.set(moments.first);
    secondMoments(density.model, moments, sums.second);
  });
}

/** Second moments as packed lower triangles; of axial families only the diagonal, the rest zero. */
function secondMoments({ k, p }: MixtureModel, { squares, cross, nCols }: MixtureMoments, second: Float64Array): void {
  for (let c = 0, i = 0; c < k; c++) {
    for (let a = 0; a < p; a++) {
      for (let b = 0; b <= a; b++, i++) {
        if (cross) second[i] = cross[(c * nCols + b) * nCols + a]!;
        else second[i] = a === b ? squares[c * p + a]! : 0;
      }
    }
  }
}
