/**
 * `DenseMath.addCrossProducts` in plain loops: pairs of rows by their even and odd halves, then the
 * last of an odd number of rows.
 */
export function addCrossProducts(
  x: Float64Array,
  stride: number,
  count: number,
  nCols: number,
  cross: Float64Array,
): void {
  for (let i = 0; i < nCols; i++) {
    for (let j = i - (i % 4); j < nCols; j++) {
      const [p, q] = [i * stride, j * stride];
      let [even, odd] = [0, 0];
      for (let row = 0; row + 1 < count; row += 2) {
        even += x[p + row]! * x[q + row]!;
        odd += x[p + row + 1]! * x[q + row + 1]!;
      }
      cross[i * nCols + j]! += even + odd;
      if (count % 2 === 1) cross[i * nCols + j]! += x[p + count - 1]! * x[q + count - 1]!;
    }
  }
}
