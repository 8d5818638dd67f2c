import { dot, requireVector, type Vector } from '#kernels/geometry/directions.ts';
import { KernelError } from '#kernels/kernel-error.ts';

/**
 * Number of directions in a list, once each is known to be a unit vector.
 *
 * @param vectors Row-major, shape (n, 3), east, north, up.
 * @throws {KernelError} `shape`; `too-few-rows` when empty; `not-unit` with { row } where the length
 *   is off 1 by more than 1e-6 (NaN too).
 */
export function checkUnitVectors(vectors: Float64Array): number {
  if (vectors.length % 3 !== 0) {
    throw new KernelError('shape', `${vectors.length} numbers do not fill rows of 3`);
  }
  const n = vectors.length / 3;
  if (n === 0) throw new KernelError('too-few-rows', 'expected directions, found none');
  for (let row = 0; row < n; row++) {
    const length = Math.hypot(...vectorAt(vectors, row));
    if (!(Math.abs(length - 1) <= 1e-6)) {
      throw new KernelError('not-unit', `expected length 1, found ${length} in row ${row}`, {
        row,
      });
    }
  }
  return n;
}

/** Row `row` of an (n, 3) array. */
export function vectorAt(vectors: Float64Array, row: number): [number, number, number] {
  return [vectors[3 * row]!, vectors[3 * row + 1]!, vectors[3 * row + 2]!];
}

/**
 * Turns each direction to the side of an axis: v with v . axis >= 0. Axial data (poles of planes)
 * need this before any vector sum, as steep poles point both ways.
 *
 * @returns New array.
 * @throws {KernelError} As `checkUnitVectors`; `not-finite` at the axis.
 */
export function flipToAxis(vectors: Float64Array, axis: Vector): Float64Array {
  checkUnitVectors(vectors);
  requireVector(axis);
  const flipped = vectors.slice();
  for (let row = 0; row < vectors.length / 3; row++) {
    if (dot(vectorAt(vectors, row), axis) >= 0) continue;
    for (let i = 3 * row; i < 3 * row + 3; i++) flipped[i] = -vectors[i]!;
  }
  return flipped;
}
