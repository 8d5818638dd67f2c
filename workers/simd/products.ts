import { both } from './memory';

/** Adds to four cells of a row-major square the sums of four pairs of lanes. */
@inline
function addTwo(cell: usize, a: v128, b: v128): void {
  store<f64>(cell, load<f64>(cell) + both(a));
  store<f64>(cell, load<f64>(cell, 8) + both(b), 8);
}

/** cross[i, j] += Σ x_i[r] x_j[r] of four columns i by two columns j, over whole pairs of rows. */
function addTile(x: usize, step: usize, count: i32, cell: usize, width: usize, i: i32, j: i32): void {
  let p = x + usize(i) * step;
  let q = x + usize(j) * step;
  let a0 = f64x2.splat(0);
  let a1 = f64x2.splat(0);
  let b0 = f64x2.splat(0);
  let b1 = f64x2.splat(0);
  let c0 = f64x2.splat(0);
  let c1 = f64x2.splat(0);
  let d0 = f64x2.splat(0);
  let d1 = f64x2.splat(0);
  const step2 = step << 1;
  const step3 = step2 + step;
  const end = p + (usize(count & ~1) << 3);
  for (; p < end; p += 16, q += 16) {
    const y0 = v128.load(q);
    const y1 = v128.load(q + step);
    let value = v128.load(p);
    a0 = f64x2.add(a0, f64x2.mul(value, y0));
    a1 = f64x2.add(a1, f64x2.mul(value, y1));
    value = v128.load(p + step);
    b0 = f64x2.add(b0, f64x2.mul(value, y0));
    b1 = f64x2.add(b1, f64x2.mul(value, y1));
    value = v128.load(p + step2);
    c0 = f64x2.add(c0, f64x2.mul(value, y0));
    c1 = f64x2.add(c1, f64x2.mul(value, y1));
    value = v128.load(p + step3);
    d0 = f64x2.add(d0, f64x2.mul(value, y0));
    d1 = f64x2.add(d1, f64x2.mul(value, y1));
  }
  addTwo(cell, a0, a1);
  addTwo(cell + width, b0, b1);
  addTwo(cell + 2 * width, c0, c1);
  addTwo(cell + 3 * width, d0, d1);
}

/** Adds the products of one row, the last of an odd number. */
function addRowProducts(row: usize, step: usize, nCols: i32, cross: usize): void {
  for (let i = 0; i < nCols; i++) {
    const value = load<f64>(row + usize(i) * step);
    for (let j = i & ~3; j < nCols; j++) {
      const cell = cross + (usize(i * nCols + j) << 3);
      store<f64>(cell, load<f64>(cell) + value * load<f64>(row + usize(j) * step));
    }
  }
}

/** See `DenseMath.addCrossProducts`. */
export function addCrossProducts(x: usize, stride: i32, count: i32, nCols: i32, cross: usize): void {
  const step = usize(stride) << 3;
  const width = usize(nCols) << 3;
  for (let i = 0; i < nCols; i += 4) {
    for (let j = i; j < nCols; j += 2) {
      addTile(x, step, count, cross + usize(i) * width + (usize(j) << 3), width, i, j);
    }
  }
  if (count & 1) addRowProducts(x + (usize(count - 1) << 3), step, nCols, cross);
}

/** See `DenseMath.addColumnSums`. */
export function addColumnSums(x: usize, stride: i32, count: i32, nCols: i32, sums: usize): void {
  for (let col = 0; col < nCols; col++) {
    let at = x + (usize(col) * usize(stride) << 3);
    let sum = f64x2.splat(0);
    const end = at + (usize(count & ~1) << 3);
    for (; at < end; at += 16) sum = f64x2.add(sum, v128.load(at));
    if (count & 1) sum = f64x2.add(sum, v128.load64_zero(at));
    const place = sums + (usize(col) << 3);
    store<f64>(place, load<f64>(place) + both(sum));
  }
}

/** Four weighted sums of the columns for two rows, or for the last one. */
@inline
function projectTwo(x: usize, step: usize, nCols: i32, weights: usize, out: usize, isPair: bool): void {
  let a = f64x2.splat(0);
  let b = f64x2.splat(0);
  let c = f64x2.splat(0);
  let d = f64x2.splat(0);
  for (let col = 0; col < nCols; col++, x += step, weights += 32) {
    const value = isPair ? v128.load(x) : v128.load64_zero(x);
    a = f64x2.add(a, f64x2.mul(value, v128.load64_splat(weights)));
    b = f64x2.add(b, f64x2.mul(value, v128.load64_splat(weights, 8)));
    c = f64x2.add(c, f64x2.mul(value, v128.load64_splat(weights, 16)));
    d = f64x2.add(d, f64x2.mul(value, v128.load64_splat(weights, 24)));
  }
  if (isPair) {
    v128.store(out, a);
    v128.store(out + step, b);
    v128.store(out + 2 * step, c);
    v128.store(out + 3 * step, d);
    return;
  }
  v128.store64_lane(out, a, 0);
  v128.store64_lane(out + step, b, 0);
  v128.store64_lane(out + 2 * step, c, 0);
  v128.store64_lane(out + 3 * step, d, 0);
}

/** Four weighted sums of the columns for four rows. */
@inline
function projectFour(x: usize, step: usize, nCols: i32, weights: usize, out: usize): void {
  let a0 = f64x2.splat(0);
  let a1 = f64x2.splat(0);
  let b0 = f64x2.splat(0);
  let b1 = f64x2.splat(0);
  let c0 = f64x2.splat(0);
  let c1 = f64x2.splat(0);
  let d0 = f64x2.splat(0);
  let d1 = f64x2.splat(0);
  for (let col = 0; col < nCols; col++, x += step, weights += 32) {
    const x0 = v128.load(x);
    const x1 = v128.load(x, 16);
    let weight = v128.load64_splat(weights);
    a0 = f64x2.add(a0, f64x2.mul(x0, weight));
    a1 = f64x2.add(a1, f64x2.mul(x1, weight));
    weight = v128.load64_splat(weights, 8);
    b0 = f64x2.add(b0, f64x2.mul(x0, weight));
    b1 = f64x2.add(b1, f64x2.mul(x1, weight));
    weight = v128.load64_splat(weights, 16);
    c0 = f64x2.add(c0, f64x2.mul(x0, weight));
    c1 = f64x2.add(c1, f64x2.mul(x1, weight));
    weight = v128.load64_splat(weights, 24);
    d0 = f64x2.add(d0, f64x2.mul(x0, weight));
    d1 = f64x2.add(d1, f64x2.mul(x1, weight));
  }
  v128.store(out, a0);
  v128.store(out, a1, 16);
  v128.store(out + step, b0);
  v128.store(out + step, b1, 16);
  v128.store(out + 2 * step, c0);
  v128.store(out + 2 * step, c1, 16);
  v128.store(out + 3 * step, d0);
  v128.store(out + 3 * step, d1, 16);
}

/** See `DenseMath.project`. */
export function project(x: usize, stride: i32, count: i32, nCols: i32, weights: usize, nOut: i32, out: usize): void {
  const step = usize(stride) << 3;
  for (let first = 0; first < nOut; first += 4) {
    const table = weights + (usize(first) * usize(nCols) << 3);
    const target = out + usize(first) * step;
    let i = 0;
    for (; i + 3 < count; i += 4) projectFour(x + (usize(i) << 3), step, nCols, table, target + (usize(i) << 3));
    for (; i + 1 < count; i += 2) projectTwo(x + (usize(i) << 3), step, nCols, table, target + (usize(i) << 3), true);
    if (i < count) projectTwo(x + (usize(i) << 3), step, nCols, table, target + (usize(i) << 3), false);
  }
}
