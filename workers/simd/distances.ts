import { both } from './memory';

/** Squared distances of one row to two others. */
@inline
function squaresTo(x: usize, step: usize, p: i32, a: usize, b: usize): v128 {
  let sq = f64x2.splat(0);
  for (let j = 0; j < p; j++, a += step, b += step) {
    const d = f64x2.sub(v128.load64_splat(a), v128.load(b));
    sq = f64x2.add(sq, f64x2.mul(d, d));
  }
  return sq;
}

/** See `DenseMath.addDistances`. */
export function addDistances(
  x: usize, stride: i32, p: i32, starts: usize, k: i32, from: i32, to: i32, sums: usize,
): void {
  const step = usize(stride) << 3;
  let own = 0;
  for (let row = from; row < to; row++) {
    while (u32(row) >= load<u32>(starts + (usize(own + 1) << 2))) own++;
    const a = x + (usize(row) << 3);
    const ownSums = sums + usize(own) * step;
    for (let g = own; g < k; g++) {
      let b = max(row + 1, i32(load<u32>(starts + (usize(g) << 2))));
      const end = i32(load<u32>(starts + (usize(g + 1) << 2)));
      let total = f64x2.splat(0);
      for (; b + 7 < end; b += 8) {
        let pa = a;
        let pb = x + (usize(b) << 3);
        let sq0 = f64x2.splat(0);
        let sq1 = f64x2.splat(0);
        let sq2 = f64x2.splat(0);
        let sq3 = f64x2.splat(0);
        for (let j = 0; j < p; j++, pa += step, pb += step) {
          const value = v128.load64_splat(pa);
          let d = f64x2.sub(value, v128.load(pb));
          sq0 = f64x2.add(sq0, f64x2.mul(d, d));
          d = f64x2.sub(value, v128.load(pb, 16));
          sq1 = f64x2.add(sq1, f64x2.mul(d, d));
          d = f64x2.sub(value, v128.load(pb, 32));
          sq2 = f64x2.add(sq2, f64x2.mul(d, d));
          d = f64x2.sub(value, v128.load(pb, 48));
          sq3 = f64x2.add(sq3, f64x2.mul(d, d));
        }
        sq0 = f64x2.sqrt(sq0);
        sq1 = f64x2.sqrt(sq1);
        sq2 = f64x2.sqrt(sq2);
        sq3 = f64x2.sqrt(sq3);
        const place = ownSums + (usize(b) << 3);
        v128.store(place, f64x2.add(v128.load(place), sq0));
        v128.store(place, f64x2.add(v128.load(place, 16), sq1), 16);
        v128.store(place, f64x2.add(v128.load(place, 32), sq2), 32);
        v128.store(place, f64x2.add(v128.load(place, 48), sq3), 48);
        total = f64x2.add(f64x2.add(f64x2.add(f64x2.add(total, sq0), sq1), sq2), sq3);
      }
      for (; b + 1 < end; b += 2) {
        const distance = f64x2.sqrt(squaresTo(x, step, p, a, x + (usize(b) << 3)));
        const place = ownSums + (usize(b) << 3);
        v128.store(place, f64x2.add(v128.load(place), distance));
        total = f64x2.add(total, distance);
      }
      let sum = both(total);
      if (b < end) {
        let sq: f64 = 0;
        for (let j = 0; j < p; j++) {
          const d = load<f64>(a + usize(j) * step) - load<f64>(x + (usize(b) << 3) + usize(j) * step);
          sq += d * d;
        }
        const distance = Math.sqrt(sq);
        const place = ownSums + (usize(b) << 3);
        store<f64>(place, load<f64>(place) + distance);
        sum += distance;
      }
      const place = sums + usize(g) * step + (usize(row) << 3);
      store<f64>(place, load<f64>(place) + sum);
    }
  }
}
