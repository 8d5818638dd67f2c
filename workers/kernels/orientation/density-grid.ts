import { KernelError } from '#kernels/kernel-error.ts';
import { lineAtPoint, type Net } from './projection.ts';
import { checkUnitVectors } from './unit-vectors.ts';

/** Kamb's counting circle for n axes. */
export interface CountingCircle {
  /** Share of the hemisphere it covers. */
  area: number;
  halfAngleDeg: number;
  /** Count expected of uniform axes, and its standard deviation. */
  expected: number;
  sd: number;
}

/** Density of axes over the net in standard deviations from uniform. */
export interface DensityGrid extends CountingCircle {
  /** Nodes along each side of the square [-1, 1] x [-1, 1]. */
  size: number;
  /** Row-major from south-west, x east fastest: (count - expected) / sd; NaN outside the circle. */
  values: Float64Array;
}

/**
 * Size of the counting circle so that a uniform fabric has expected count `k` standard deviations.
 *
 * @param n Number of axes, >= 1.  @param k Kamb's 3 unless told.
 * @throws {KernelError} `too-few-rows`; `bad-parameter`.
 * @see Kamb (1959), Journal of Geophysical Research 64, 1891-1909 (from memory).
 */
export function countingCircle(n: number, k = 3): CountingCircle {
  if (!(n >= 1)) throw new KernelError('too-few-rows', 'expected axes to count, found none');
  if (n === Infinity)
    throw new KernelError('bad-parameter', 'expected a count of axes, found no end');
  if (!(k > 0 && k < Infinity))
    throw new KernelError('bad-parameter', `expected k > 0, found ${k}`);
  const area = (k * k) / (n + k * k);
  const halfAngleDeg = (Math.acos(1 - area) * 180) / Math.PI;
  return { area, halfAngleDeg, expected: n * area, sd: Math.sqrt(n * area * (1 - area)) };
}

/**
 * Kamb density grid of axes on the lower hemisphere; contour it at 2, 4, 6 ... An axis is counted by
 * either end, so that a cluster at the rim shows on both sides.
 *
 * @param vectors Unit vectors, row-major, shape (n, 3).
 * @param options.size Nodes along a side, >= 3, 61 unless told.
 * @throws {KernelError} `shape`; `too-few-rows`; `not-unit`; `bad-parameter`.
 */
export function densityGrid(
  vectors: Float64Array,
  net: Net,
  options: { size?: number; k?: number; onProgress?: (share: number) => void } = {},
): DensityGrid {
  const { size = 61, k = 3, onProgress } = options;
  const circle = countingCircle(checkUnitVectors(vectors), k);
  if (!(Number.isInteger(size) && size >= 3)) {
    throw new KernelError('bad-parameter', `expected 3 or more grid nodes, found ${size}`);
  }
  const least = 1 - circle.area;
  const values = new Float64Array(size * size).fill(NaN);
  for (let row = 0; row < size; row++) {
    for (let col = 0; col < size; col++) {
      const x = -1 + (2 * col) / (size - 1);
      const y = -1 + (2 * row) / (size - 1);
      if (x * x + y * y > 1 + 1e-12) continue;
      const count = countWithin(vectors, lineAtPoint(x, y, net), least);
      values[row * size + col] = (count - circle.expected) / circle.sd;
    }
    onProgress?.((row + 1) / size);
  }
  return { ...circle, size, values };
}

function countWithin(
  vectors: Float64Array,
  [x, y, z]: [number, number, number],
  leastCosine: number,
): number {
  let count = 0;
  for (let i = 0; i < vectors.length; i += 3) {
    const cosine = vectors[i]! * x + vectors[i + 1]! * y + vectors[i + 2]! * z;
    if (Math.abs(cosine) >= leastCosine) count++;
  }
  return count;
}
