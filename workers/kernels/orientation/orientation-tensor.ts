import { upwardNormal } from '#kernels/geometry/planes.ts';
import type { Vector } from '#kernels/geometry/directions.ts';
import { EigenvalueDecomposition, Matrix } from 'ml-matrix';
import { KernelError } from '#kernels/kernel-error.ts';
import { checkUnitVectors, vectorAt } from './unit-vectors.ts';

/** Second moment of directions about the origin; the sign of a direction does not matter. */
export interface OrientationTensor {
  n: number;
  /** Kish's effective number of directions, n when they weigh alike. */
  nEffective: number;
  /** Rows of the symmetric 3 x 3 tensor sum(w v v') / sum(w). */
  tensor: [Vector, Vector, Vector];
  /** S1 >= S2 >= S3 >= 0, sum 1. */
  eigenvalues: Vector;
  /** Unit axes of S1, S2, S3, each turned upward. */
  axes: [Vector, Vector, Vector];
}

/** Entries under this share of the trace are 0: the decomposition fails on denormal numbers. */
const NEGLIGIBLE = 1e-30;

/**
 * Orientation tensor of axes or directions with its eigenvalues and principal axes.
 *
 * @param vectors Unit vectors, row-major, shape (n, 3), east, north, up.
 * @param weights n weights > 0, such as Terzaghi's; equal when left out.
 * @throws {KernelError} `shape`; `too-few-rows`; `not-unit`; `not-positive` with { row } at a weight.
 * @see Scheidegger (1965), US Geological Survey Professional Paper 525-C; Watson (1966), Journal of
 *   Geology 74; Kish (1965), Survey Sampling, for the effective number.
 */
export function orientationTensor(
  vectors: Float64Array,
  weights?: Float64Array,
): OrientationTensor {
  const n = checkUnitVectors(vectors);
  const used = weights ?? new Float64Array(n).fill(1);
  if (used.length !== n)
    throw new KernelError('shape', `expected ${n} weights, found ${used.length}`);
  let [xx, xy, xz, yy, yz, zz, total, squares] = [0, 0, 0, 0, 0, 0, 0, 0];
  used.forEach((weight, row) => {
    if (!(weight > 0 && weight < Infinity)) {
      const message = `expected a weight > 0, found ${weight} in row ${row}`;
      throw new KernelError('not-positive', message, { row });
    }
    const [x, y, z] = vectorAt(vectors, row);
    xx += weight * x * x;
    xy += weight * x * y;
    xz += weight * x * z;
    yy += weight * y * y;
    yz += weight * y * z;
    zz += weight * z * z;
    total += weight;
    squares += weight * weight;
  });
  const mean = (sum: number) => (Math.abs(sum) < NEGLIGIBLE * total ? 0 : sum / total);
  const tensor = new Matrix([
    [xx, xy, xz].map(mean),
    [xy, yy, yz].map(mean),
    [xz, yz, zz].map(mean),
  ]);
  return { n, nEffective: (total * total) / squares, ...principal(tensor) };
}

function principal(tensor: Matrix): Pick<OrientationTensor, 'tensor' | 'eigenvalues' | 'axes'> {
  const solved = new EigenvalueDecomposition(tensor, { assumeSymmetric: true });
  const values = solved.realEigenvalues;
  const order = [0, 1, 2].sort((a, b) => values[b]! - values[a]!);
  const triple = (matrix: Matrix, of: 'row' | 'column', i: number): Vector => {
    const [x = NaN, y = NaN, z = NaN] = of === 'row' ? matrix.getRow(i) : matrix.getColumn(i);
    return [x, y, z];
  };
  const value = (k: number) => Math.max(0, values[order[k]!]!);
  const axis = (k: number) => upwardNormal(triple(solved.eigenvectorMatrix, 'column', order[k]!));
  return {
    tensor: [triple(tensor, 'row', 0), triple(tensor, 'row', 1), triple(tensor, 'row', 2)],
    eigenvalues: [value(0), value(1), value(2)],
    axes: [axis(0), axis(1), axis(2)],
  };
}
