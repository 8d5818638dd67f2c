/** Place of the pair (a, b), a ≠ b, among the n (n - 1) / 2 distances of n rows. */
export function pairIndex(a: number, b: number, n: number): number {
  const [low, high] = a < b ? [a, b] : [b, a];
  return low * n - (low * (low + 1)) / 2 + high - low - 1;
}

/**
 * Euclidean distances between all pairs of rows.
 *
 * @param points Row-major, shape (n, p).
 * @returns n (n - 1) / 2 distances: (0,1) (0,2) ... (1,2) ...
 */
export function condensedDistances(points: Float64Array, n: number, p: number): Float64Array {
  const out = new Float64Array((n * (n - 1)) / 2);
  for (let a = 0, at = 0; a < n; a++) {
    const rowA = a * p;
    for (let b = a + 1; b < n; b++) {
      let squares = 0;
      for (let j = 0, i = b * p; j < p; j++, i++) {
        const d = points[rowA + j]! - points[i]!;
        squares += d * d;
      }
      out[at++] = Math.sqrt(squares);
    }
  }
  return out;
}
