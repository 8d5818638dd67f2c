import { expTwo } from './exponential';
import { lnTwoNormal } from './logarithm';
import { addCrossProducts } from './products';
import { both } from './memory';

/** ln of a density ratio too small to change a sum of doubles. */
const NEGLIGIBLE: f64 = -37.0;

// Pairs of rows may read and write the place after the last row: strides are even, and what stands
// there is never used.

/** ln share less half the squared distance, axes along the coordinates. */
function axialLogs(
  x: usize, step: usize, count: i32, p: i32, mean: usize, whitener: usize, scale: f64, out: usize,
): void {
  for (let r = 0; r < count; r += 2) {
    let squares = f64x2.splat(0);
    let at = x + (usize(r) << 3);
    let white = whitener;
    for (let j = 0; j < p; j++) {
      const d = f64x2.sub(v128.load(at), v128.load64_splat(mean + (usize(j) << 3)));
      const z = f64x2.mul(d, v128.load64_splat(white));
      squares = f64x2.add(squares, f64x2.mul(z, z));
      at += step;
      white += usize(j + 2) << 3;
    }
    v128.store(out + (usize(r) << 3), f64x2.sub(f64x2.splat(scale), f64x2.mul(f64x2.splat(0.5), squares)));
  }
}

/** The same with a triangle of weights per group; eight rows, then two rows at a time. */
function ellipsoidLogs(
  x: usize, step: usize, count: i32, p: i32, mean: usize, whitener: usize, scale: f64, deviations: usize, out: usize,
): void {
  for (let j = 0; j < p; j++) {
    const centre = v128.load64_splat(mean + (usize(j) << 3));
    const from = x + usize(j) * step;
    const to = deviations + usize(j) * step;
    for (let r: usize = 0; r < usize(count) << 3; r += 16) v128.store(to + r, f64x2.sub(v128.load(from + r), centre));
  }
  const half = f64x2.splat(0.5);
  const scales = f64x2.splat(scale);
  let r = 0;
  for (; r + 7 < count; r += 8) {
    let white = whitener;
    let squares0 = f64x2.splat(0);
    let squares1 = f64x2.splat(0);
    let squares2 = f64x2.splat(0);
    let squares3 = f64x2.splat(0);
    const first = deviations + (usize(r) << 3);
    for (let a = 0; a < p; a++) {
      let sum0 = f64x2.splat(0);
      let sum1 = f64x2.splat(0);
      let sum2 = f64x2.splat(0);
      let sum3 = f64x2.splat(0);
      let at = first;
      for (let b = 0; b <= a; b++, at += step, white += 8) {
        const w = v128.load64_splat(white);
        sum0 = f64x2.add(sum0, f64x2.mul(w, v128.load(at)));
        sum1 = f64x2.add(sum1, f64x2.mul(w, v128.load(at, 16)));
        sum2 = f64x2.add(sum2, f64x2.mul(w, v128.load(at, 32)));
        sum3 = f64x2.add(sum3, f64x2.mul(w, v128.load(at, 48)));
      }
      squares0 = f64x2.add(squares0, f64x2.mul(sum0, sum0));
      squares1 = f64x2.add(squares1, f64x2.mul(sum1, sum1));
      squares2 = f64x2.add(squares2, f64x2.mul(sum2, sum2));
      squares3 = f64x2.add(squares3, f64x2.mul(sum3, sum3));
    }
    const to = out + (usize(r) << 3);
    v128.store(to, f64x2.sub(scales, f64x2.mul(half, squares0)));
    v128.store(to, f64x2.sub(scales, f64x2.mul(half, squares1)), 16);
    v128.store(to, f64x2.sub(scales, f64x2.mul(half, squares2)), 32);
    v128.store(to, f64x2.sub(scales, f64x2.mul(half, squares3)), 48);
  }
  for (; r < count; r += 2) {
    let white = whitener;
    let squares = f64x2.splat(0);
    for (let a = 0; a < p; a++) {
      let sum = f64x2.splat(0);
      let at = deviations + (usize(r) << 3);
      for (let b = 0; b <= a; b++, at += step, white += 8) {
        sum = f64x2.add(sum, f64x2.mul(v128.load64_splat(white), v128.load(at)));
      }
      squares = f64x2.add(squares, f64x2.mul(sum, sum));
    }
    v128.store(out + (usize(r) << 3), f64x2.sub(scales, f64x2.mul(half, squares)));
  }
}

/** See `DenseMath.mixtureShares`. */
export function mixtureShares(
  x: usize, stride: i32, count: i32, p: i32, k: i32, isAxial: i32, means: usize, whiteners: usize, logScales: usize,
  deviations: usize, shares: usize, logDensity: usize,
): void {
  const step = usize(stride) << 3;
  const size = usize((p * (p + 1)) >> 1) << 3;
  for (let c = 0; c < k; c++) {
    const mean = means + (usize(c) * usize(p) << 3);
    const white = whiteners + usize(c) * size;
    const scale = load<f64>(logScales + (usize(c) << 3));
    const out = shares + usize(c) * step;
    if (isAxial) axialLogs(x, step, count, p, mean, white, scale, out);
    else ellipsoidLogs(x, step, count, p, mean, white, scale, deviations, out);
  }
  const end = shares + usize(k) * step;
  for (let r: usize = 0; r < usize(count) << 3; r += 16) {
    let top = f64x2.splat(-Infinity);
    for (let at = shares + r; at < end; at += step) top = f64x2.pmax(top, v128.load(at));
    let total = f64x2.splat(0);
    for (let at = shares + r; at < end; at += step) {
      const less = f64x2.sub(v128.load(at), top);
      const isNegligible = f64x2.lt(less, f64x2.splat(NEGLIGIBLE));
      const share = v128.andnot(expTwo(less), isNegligible);
      v128.store(at, share);
      total = f64x2.add(total, share);
    }
    v128.store(logDensity + r, f64x2.add(top, lnTwoNormal(total)));
    const inverse = f64x2.div(f64x2.splat(1.0), total);
    for (let at = shares + r; at < end; at += step) v128.store(at, f64x2.mul(v128.load(at), inverse));
  }
}

/** See `DenseMath.addGroupMoments`; `cross` 0: squares only. */
export function addGroupMoments(
  x: usize, stride: i32, count: i32, p: i32, nCols: i32, mean: usize, shares: usize,
  rows: usize, roots: usize, deviations: usize, first: usize, squares: usize, cross: usize,
): f64 {
  const step = usize(stride) << 3;
  let used = 0;
  let mass: f64 = 0;
  for (let r = 0; r < count; r++) {
    const share = load<f64>(shares + (usize(r) << 3));
    if (share == 0) continue;
    mass += share;
    store<u32>(rows + (usize(used) << 2), u32(r));
    store<f64>(roots + (usize(used) << 3), Math.sqrt(share));
    used++;
  }
  for (let j = 0; j < p; j++) {
    const from = x + usize(j) * step;
    const to = deviations + usize(j) * step;
    const centre = v128.load64_splat(mean + (usize(j) << 3));
    let sum = f64x2.splat(0);
    let square = f64x2.splat(0);
    let t = 0;
    for (; t + 1 < used; t += 2) {
      const place = rows + (usize(t) << 2);
      let value = v128.load64_zero(from + (usize(load<u32>(place)) << 3));
      value = v128.load64_lane(from + (usize(load<u32>(place, 4)) << 3), value, 1);
      const root = v128.load(roots + (usize(t) << 3));
      const scaled = f64x2.mul(root, f64x2.sub(value, centre));
      v128.store(to + (usize(t) << 3), scaled);
      sum = f64x2.add(sum, f64x2.mul(root, scaled));
      square = f64x2.add(square, f64x2.mul(scaled, scaled));
    }
    if (t < used) {
      const value = v128.load64_zero(from + (usize(load<u32>(rows + (usize(t) << 2))) << 3));
      const root = v128.load64_zero(roots + (usize(t) << 3)); // 0 in the other lane
      const scaled = f64x2.mul(root, f64x2.sub(value, centre));
      v128.store64_lane(to + (usize(t) << 3), scaled, 0);
      sum = f64x2.add(sum, f64x2.mul(root, scaled));
      square = f64x2.add(square, f64x2.mul(scaled, scaled));
    }
    const at = usize(j) << 3;
    store<f64>(first + at, load<f64>(first + at) + both(sum));
    store<f64>(squares + at, load<f64>(squares + at) + both(square));
  }
  if (cross) addCrossProducts(deviations, stride, used, nCols, cross);
  return mass;
}
