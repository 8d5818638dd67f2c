/** `DenseMath.addCrossProducts` in plain loops. */
export function addCrossProducts(
  x: Float64Array,
  stride: number,
  count: number,
  nCols: number,
  cross: Float64Array,
): void {
  for (let i = 0; i < nCols; i++) {
    for (let j = i - (i % 4); j < nCols; j++) {
      let [even, odd] = [0, 0];
      for (let row = 0, p = i * stride, q = j * stride; row < count; row += 2, p += 2, q += 2) {
        even += x[p]! * x[q]!;
        if (row + 1 < count) odd += x[p + 1]! * x[q + 1]!;
      }
      cross[i * nCols + j]! += even + odd;
    }
  }
}
