import { both } from './memory';

/** Squared distance of two stretches of an even number of coordinates. */
@inline
export function squaredDistance(a: usize, b: usize, stride: i32): f64 {
  let sum = f64x2.splat(0);
  const end = a + (usize(stride) << 3);
  for (; a < end; a += 16, b += 16) {
    const d = f64x2.sub(v128.load(a), v128.load(b));
    sum = f64x2.add(sum, f64x2.mul(d, d));
  }
  return both(sum);
}

/** The same for eight coordinates whose first row is in registers. */
@inline
function squaredDistance8(x0: v128, x1: v128, x2: v128, x3: v128, centre: usize): f64 {
  const d0 = f64x2.sub(x0, v128.load(centre));
  const d1 = f64x2.sub(x1, v128.load(centre, 16));
  const d2 = f64x2.sub(x2, v128.load(centre, 32));
  const d3 = f64x2.sub(x3, v128.load(centre, 48));
  let sum = f64x2.add(f64x2.mul(d0, d0), f64x2.mul(d1, d1));
  sum = f64x2.add(sum, f64x2.mul(d2, d2));
  return both(f64x2.add(sum, f64x2.mul(d3, d3)));
}

/** Squared distances of the last row looked at to its nearest and its next centre. */
let nearestSq: f64 = 0;
let nextSq: f64 = 0;

/** The nearest centre of a row, the first one on a tie. */
@inline
function nearestOf(row: usize, stride: i32, centres: usize, k: i32): i32 {
  let best = 0;
  let bestSq = Infinity;
  let secondSq = Infinity;
  if (stride == 8) {
    const x0 = v128.load(row);
    const x1 = v128.load(row, 16);
    const x2 = v128.load(row, 32);
    const x3 = v128.load(row, 48);
    for (let c = 0, at = centres; c < k; c++, at += 64) {
      const sq = squaredDistance8(x0, x1, x2, x3, at);
      if (sq < bestSq) {
        secondSq = bestSq;
        bestSq = sq;
        best = c;
      } else if (sq < secondSq) secondSq = sq;
    }
  } else {
    for (let c = 0, at = centres; c < k; c++, at += usize(stride) << 3) {
      const sq = squaredDistance(row, at, stride);
      if (sq < bestSq) {
        secondSq = bestSq;
        bestSq = sq;
        best = c;
      } else if (sq < secondSq) secondSq = sq;
    }
  }
  nearestSq = bestSq;
  nextSq = secondSq;
  return best;
}

/** See `DenseMath.nearestTwo`. */
export function nearestTwo(
  points: usize, n: i32, stride: i32, centres: usize, k: i32, labels: usize, nearest: usize, next: usize,
): void {
  for (let i = 0; i < n; i++) {
    store<u8>(labels + usize(i), u8(nearestOf(points + (usize(i) * usize(stride) << 3), stride, centres, k)));
    store<f64>(nearest + (usize(i) << 3), nearestSq);
    store<f64>(next + (usize(i) << 3), nextSq);
  }
}

const NONE: u8 = 255;

/** Adds a row, `weight` times, to the sums of a group. */
@inline
function addRow(sums: usize, row: usize, stride: i32, weight: f64): void {
  const w = f64x2.splat(weight);
  const end = row + (usize(stride) << 3);
  for (; row < end; row += 16, sums += 16) {
    v128.store(sums, f64x2.add(v128.load(sums), f64x2.mul(w, v128.load(row))));
  }
}

/** See `DenseMath.assign`; `weights` 0: all rows count 1. */
export function assign(
  points: usize, n: i32, stride: i32, centres: usize, k: i32, weights: usize,
  labels: usize, lead: usize, slack: usize, sums: usize, mass: usize, counts: usize,
): i32 {
  const width = usize(stride) << 3;
  let changed = 0;
  for (let i = 0; i < n; i++) {
    const old = load<u8>(labels + usize(i));
    const leadAt = lead + (usize(i) << 3);
    if (old != NONE && load<f64>(leadAt) > load<f64>(slack + (usize(old) << 3))) continue;
    const row = points + usize(i) * width;
    const label = nearestOf(row, stride, centres, k);
    store<f64>(leadAt, Math.sqrt(nextSq) - Math.sqrt(nearestSq) + load<f64>(slack + (usize(label) << 3)));
    if (label == i32(old)) continue;
    changed++;
    const w = weights ? load<f64>(weights + (usize(i) << 3)) : 1.0;
    if (old != NONE) {
      const massAt = mass + (usize(old) << 3);
      const countAt = counts + (usize(old) << 2);
      store<f64>(massAt, load<f64>(massAt) - w);
      store<u32>(countAt, load<u32>(countAt) - 1);
      addRow(sums + usize(old) * width, row, stride, -w);
    }
    const massAt = mass + (usize(label) << 3);
    const countAt = counts + (usize(label) << 2);
    store<f64>(massAt, load<f64>(massAt) + w);
    store<u32>(countAt, load<u32>(countAt) + 1);
    addRow(sums + usize(label) * width, row, stride, w);
    store<u8>(labels + usize(i), u8(label));
  }
  return changed;
}

/** See `DenseMath.sumGroups`. */
export function sumGroups(
  points: usize, n: i32, stride: i32, centres: usize, weights: usize, labels: usize, sums: usize, mass: usize,
): f64 {
  const width = usize(stride) << 3;
  let inertia: f64 = 0;
  for (let i = 0; i < n; i++) {
    const label = usize(load<u8>(labels + usize(i)));
    const row = points + usize(i) * width;
    const w = weights ? load<f64>(weights + (usize(i) << 3)) : 1.0;
    store<f64>(mass + (label << 3), load<f64>(mass + (label << 3)) + w);
    inertia += w * squaredDistance(row, centres + label * width, stride);
    addRow(sums + label * width, row, stride, w);
  }
  return inertia;
}

/** Moves a centre by `share` of the way to a row; returns how far, squared. */
@inline
function shift(centre: usize, row: usize, stride: i32, share: f64): f64 {
  const part = f64x2.splat(share);
  let moved = f64x2.splat(0);
  const end = row + (usize(stride) << 3);
  for (; row < end; row += 16, centre += 16) {
    const at = v128.load(centre);
    const step = f64x2.mul(part, f64x2.sub(v128.load(row), at));
    moved = f64x2.add(moved, f64x2.mul(step, step));
    v128.store(centre, f64x2.add(at, step));
  }
  return both(moved);
}

/** See `DenseMath.exchange`. */
export function exchange(
  points: usize, n: i32, stride: i32, centres: usize, k: i32, weights: usize,
  labels: usize, mass: usize, counts: usize, lead: usize, reach: f64, least: f64, maxPasses: i32,
): f64 {
  const width = usize(stride) << 3;
  let mayPass = true;
  let gained: f64 = 0;
  let drift: f64 = 0;
  for (let pass = 0, sinceMove = 0; pass < maxPasses && sinceMove < n; pass++) {
    for (let i = 0; i < n && sinceMove < n; i++, sinceMove++) {
      const leadAt = lead + (usize(i) << 3);
      if (mayPass && load<f64>(leadAt) - drift > reach) continue;
      const from = i32(load<u8>(labels + usize(i)));
      const fromCount = counts + (usize(from) << 2);
      if (load<u32>(fromCount) < 2) continue;
      const row = points + usize(i) * width;
      const w = weights ? load<f64>(weights + (usize(i) << 3)) : 1.0;
      const fromMass = mass + (usize(from) << 3);
      const own = load<f64>(fromMass);
      const ownSq = squaredDistance(row, centres + usize(from) * width, stride);
      const out = (w * own * ownSq) / (own - w);
      let to = from;
      let into = out * (1.0 - 1e-12);
      let nextSq: f64 = Infinity;
      for (let c = 0; c < k; c++) {
        if (c == from) continue;
        const m = load<f64>(mass + (usize(c) << 3));
        const sq = squaredDistance(row, centres + usize(c) * width, stride);
        nextSq = Math.min(nextSq, sq);
        const cost = (w * m * sq) / (m + w);
        if (cost >= into) continue;
        into = cost;
        to = c;
      }
      if (to == from) {
        store<f64>(leadAt, Math.sqrt(nextSq) - Math.sqrt(ownSq) + drift);
        continue;
      }
      gained += out - into;
      const toMass = mass + (usize(to) << 3);
      const toCount = counts + (usize(to) << 2);
      const other = load<f64>(toMass);
      drift += Math.sqrt(shift(centres + usize(from) * width, row, stride, -w / (own - w)));
      drift += Math.sqrt(shift(centres + usize(to) * width, row, stride, w / (other + w)));
      store<f64>(fromMass, own - w);
      store<f64>(toMass, other + w);
      store<u32>(fromCount, load<u32>(fromCount) - 1);
      store<u32>(toCount, load<u32>(toCount) + 1);
      store<u8>(labels + usize(i), u8(to));
      store<f64>(leadAt, -Infinity);
      if (own - w < least) mayPass = false;
      sinceMove = 0;
    }
  }
  return gained;
}
