/**
 * Adds the products of every pair of columns over some rows, the heart of a covariance:
 * cross[i, j] += sum_r x_i[r] x_j[r] for j >= i. Four by four columns at a time, so that each value
 * read takes part in four products.
 *
 * @param x One stretch of `stride` values per column.
 * @param from First row.
 * @param to End of the rows.
 * @param nCols A multiple of four.
 * @param cross Row-major (nCols, nCols); the upper triangle is what is asked for, and the rest of
 *   the four by four tiles on the diagonal is filled too.
 */
export function addCrossProducts(
  x: Float64Array,
  stride: number,
  from: number,
  to: number,
  nCols: number,
  cross: Float64Array,
): void {
  for (let i = 0; i < nCols; i += 4) {
    for (let j = i; j < nCols; j += 4) addTile(x, stride, from, to, nCols, cross, i, j);
  }
}

function addTile(
  x: Float64Array,
  stride: number,
  from: number,
  to: number,
  nCols: number,
  cross: Float64Array,
  i: number,
  j: number,
): void {
  const [p0, p1, p2, p3] = [i * stride, (i + 1) * stride, (i + 2) * stride, (i + 3) * stride];
  const [q0, q1, q2, q3] = [j * stride, (j + 1) * stride, (j + 2) * stride, (j + 3) * stride];
  let a0 = 0,
    a1 = 0,
    a2 = 0,
    a3 = 0;
  let b0 = 0,
    b1 = 0,
    b2 = 0,
    b3 = 0;
  let c0 = 0,
    c1 = 0,
    c2 = 0,
    c3 = 0;
  let d0 = 0,
    d1 = 0,
    d2 = 0,
    d3 = 0;
  for (let row = from; row < to; row++) {
    const y0 = x[q0 + row]!;
    const y1 = x[q1 + row]!;
    const y2 = x[q2 + row]!;
    const y3 = x[q3 + row]!;
    let value = x[p0 + row]!;
    a0 += value * y0;
    a1 += value * y1;
    a2 += value * y2;
    a3 += value * y3;
    value = x[p1 + row]!;
    b0 += value * y0;
    b1 += value * y1;
    b2 += value * y2;
    b3 += value * y3;
    value = x[p2 + row]!;
    c0 += value * y0;
    c1 += value * y1;
    c2 += value * y2;
    c3 += value * y3;
    value = x[p3 + row]!;
    d0 += value * y0;
    d1 += value * y1;
    d2 += value * y2;
    d3 += value * y3;
  }
  addFour(cross, i * nCols + j, a0, a1, a2, a3);
  addFour(cross, (i + 1) * nCols + j, b0, b1, b2, b3);
  addFour(cross, (i + 2) * nCols + j, c0, c1, c2, c3);
  addFour(cross, (i + 3) * nCols + j, d0, d1, d2, d3);
}

function addFour(
  cross: Float64Array,
  at: number,
  a: number,
  b: number,
  c: number,
  d: number,
): void {
  cross[at]! += a;
  cross[at + 1]! += b;
  cross[at + 2]! += c;
  cross[at + 3]! += d;
}
