import { both, LOG_TABLE } from './memory';

const FIRST_POWER: i64 = 0x3ff0000000000000;
const FRACTION: i64 = 0x000fffffffffffff;
/** Bits of 2^52: with an integer below them, the double 2^52 + integer. */
const AS_DOUBLE: i64 = 0x4330000000000000;
const DOUBLE_BIAS: f64 = 4503599627370496.0 + 1023.0;
/** 2^54, which makes any subnormal number a normal one. */
const RAISE: f64 = 18014398509481984.0;
const LN_2: f64 = 0.6931471805599453;
const THIRD: f64 = 1.0 / 3.0;

/** Place in the table of the cell of a normal number. */
@inline
function cellOf(bits: u64): usize {
  return LOG_TABLE + (usize(bits >> 38) & 0x3ff0);
}

/** ln x of a normal number > 0; `raised` powers of two are taken off again. */
@inline
function lnNormal(x: f64, raised: f64): f64 {
  const bits = reinterpret<u64>(x);
  const cell = cellOf(bits);
  const inverse = load<f64>(cell);
  const r = reinterpret<f64>((bits & FRACTION) | FIRST_POWER) * inverse - 1.0;
  const tail = r * r * (0.5 - r * (THIRD - r * 0.25));
  const power = (f64(i64(bits >> 52)) - 1023.0 - raised) * LN_2;
  return power + (load<f64>(cell, 8) + (r - tail));
}

/** ln x; NaN unless x is a finite number > 0. */
export function lnOne(x: f64): f64 {
  if (!(x > 0 && x < Infinity)) return NaN;
  return reinterpret<u64>(x) >> 52 == 0 ? lnNormal(x * RAISE, 54.0) : lnNormal(x, 0.0);
}

/** ln of two normal numbers > 0, the way of `lnNormal` in both lanes; their cells are at `a` and `b`. */
@inline
function lnTwo(bits: v128, field: v128, cellA: usize, cellB: usize): v128 {
  const a = v128.load(cellA);
  const b = v128.load(cellB);
  const inverse = v128.shuffle<f64>(a, b, 0, 2);
  const ofCentre = v128.shuffle<f64>(a, b, 1, 3);
  const fraction = v128.or(v128.and(bits, i64x2.splat(FRACTION)), i64x2.splat(FIRST_POWER));
  const r = f64x2.sub(f64x2.mul(fraction, inverse), f64x2.splat(1.0));
  let series = f64x2.sub(f64x2.splat(THIRD), f64x2.mul(r, f64x2.splat(0.25)));
  series = f64x2.sub(f64x2.splat(0.5), f64x2.mul(r, series));
  const tail = f64x2.mul(f64x2.mul(r, r), series);
  const exponent = f64x2.sub(v128.or(field, i64x2.splat(AS_DOUBLE)), f64x2.splat(DOUBLE_BIAS));
  const power = f64x2.mul(exponent, f64x2.splat(LN_2));
  return f64x2.add(power, f64x2.add(ofCentre, f64x2.sub(r, tail)));
}

/** ln of two normal numbers > 0. */
@inline
export function lnTwoNormal(x: v128): v128 {
  return lnTwo(x, i64x2.shr_u(x, 52), cellOf(i64x2.extract_lane(x, 0)), cellOf(i64x2.extract_lane(x, 1)));
}

/** True in the lanes of zero, subnormal, negative and infinite numbers and of what is none: a field outside 1 to 2046. */
@inline
function isOdd(field: v128): v128 {
  return v128.or(i64x2.gt_s(field, i64x2.splat(2046)), i64x2.lt_s(field, i64x2.splat(1)));
}

/** `lnLessOf` one by one. */
function lnLessSlow(x: usize, from: i32, to: i32, shift: f64): i32 {
  for (let i = from; i < to; i++) {
    const at = x + (usize(i) << 3);
    const ln = lnOne(load<f64>(at));
    if (isNaN(ln)) return i;
    store<f64>(at, ln - shift);
  }
  return -1;
}

/** Replaces `count` values by their logarithms less `shift`; the place of one without a logarithm, or -1. */
function lnLessOf(x: usize, count: i32, shift: f64): i32 {
  const less = f64x2.splat(shift);
  let i = 0;
  for (; i + 3 < count; i += 4) {
    const at = x + (usize(i) << 3);
    const a = v128.load(at);
    const b = v128.load(at, 16);
    const fieldA = i64x2.shr_u(a, 52);
    const fieldB = i64x2.shr_u(b, 52);
    if (v128.any_true(v128.or(isOdd(fieldA), isOdd(fieldB)))) {
      const bad = lnLessSlow(x, i, i + 4, shift);
      if (bad >= 0) return bad;
      continue;
    }
    const lnA = lnTwo(a, fieldA, cellOf(load<u64>(at)), cellOf(load<u64>(at, 8)));
    const lnB = lnTwo(b, fieldB, cellOf(load<u64>(at, 16)), cellOf(load<u64>(at, 24)));
    v128.store(at, f64x2.sub(lnA, less));
    v128.store(at, f64x2.sub(lnB, less), 16);
  }
  return lnLessSlow(x, i, count, shift);
}

/** See `DenseMath.lnLess`. */
export function lnLess(x: usize, stride: i32, count: i32, nCols: i32, shift: usize): i32 {
  for (let col = 0; col < nCols; col++) {
    const first = usize(col) * usize(stride);
    const bad = lnLessOf(x + (first << 3), count, load<f64>(shift + (usize(col) << 3)));
    if (bad >= 0) return i32(first) + bad;
  }
  return -1;
}

/** See `DenseMath.centreRows`. */
export function centreRows(x: usize, nRows: i32, nCols: i32): void {
  for (let row = 0; row < nRows; row++) {
    const first = x + (usize(row) * usize(nCols) << 3);
    const end = first + (usize(nCols & ~1) << 3);
    let sum = f64x2.splat(0);
    for (let at = first; at < end; at += 16) sum = f64x2.add(sum, v128.load(at));
    if (nCols & 1) sum = f64x2.add(sum, v128.load64_zero(end));
    const mean = both(sum) / f64(nCols);
    const means = f64x2.splat(mean);
    for (let at = first; at < end; at += 16) v128.store(at, f64x2.sub(v128.load(at), means));
    if (nCols & 1) store<f64>(end, load<f64>(end) - mean);
  }
}
