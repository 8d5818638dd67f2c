import { copyInto, f64Bytes, type Lab } from '#kernels/dense/lab.ts';
import type { RowTable } from '#kernels/dense/dense-math.ts';

/** Coordinates per row once padded to an even number with a zero, which changes no distance. */
export const evenStride = (p: number): number => p + (p % 2);

/** Bytes of a lab that {@link rowTableOf} takes for n rows of p coordinates, weights included. */
export const rowTableBytes = (n: number, p: number): number => f64Bytes(n * evenStride(p), n);

/** Rows of p coordinates, with weights or without, copied into a lab. */
export function rowTableOf(lab: Lab, points: Float64Array, p: number, weights: Float64Array | null): RowTable {
  const n = points.length / p;
  const stride = evenStride(p);
  const padded = lab.f64(n * stride);
  if (stride === p) padded.set(points);
  else for (let i = 0; i < n; i++) for (let j = 0; j < p; j++) padded[i * stride + j] = points[i * p + j]!;
  return { points: padded, n, stride, weights: weights && copyInto(lab, weights) };
}

/** Padded rows as rows of p coordinates. */
export function unpadded(padded: Float64Array, p: number): Float64Array {
  const stride = evenStride(p);
  const n = padded.length / stride;
  const out = new Float64Array(n * p);
  for (let i = 0; i < n; i++) for (let j = 0; j < p; j++) out[i * p + j] = padded[i * stride + j]!;
  return out;
}
