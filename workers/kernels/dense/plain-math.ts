import type { DenseMath } from './dense-math.ts';
import { lnByTable } from './plain-logarithm.ts';
import { plainMixture } from './plain-mixture.ts';
import { addCrossProducts } from './plain-products.ts';
import { plainRows } from './plain-rows.ts';

/** `DenseMath` in plain loops; sums have an even and an odd half, as two lanes make them. */
export const plainMath: DenseMath = {
  ...plainRows,
  ...plainMixture,
  addCrossProducts,

  lnLess(x, stride, count, nCols, shift) {
    for (let col = 0; col < nCols; col++) {
      for (let at = col * stride; at < col * stride + count; at++) {
        const ln = lnByTable(x[at]!);
        if (Number.isNaN(ln)) return at;
        x[at] = ln - shift[col]!;
      }
    }
    return -1;
  },

  addColumnSums(x, stride, count, nCols, sums) {
    for (let col = 0; col < nCols; col++) sums[col]! += sumInTwo(x, col * stride, count);
  },

  project(x, stride, count, nCols, weights, nOut, out) {
    for (let k = 0; k < nOut; k++) {
      const table = (k - (k % 4)) * nCols + (k % 4);
      for (let row = 0; row < count; row++) {
        let sum = 0;
        for (let col = 0; col < nCols; col++) sum += x[col * stride + row]! * weights[table + 4 * col]!;
        out[k * stride + row] = sum;
      }
    }
  },

  centreRows(x, nRows, nCols) {
    for (let row = 0; row < nRows; row++) {
      const mean = sumInTwo(x, row * nCols, nCols) / nCols;
      for (let at = row * nCols; at < (row + 1) * nCols; at++) x[at]! -= mean;
    }
  },

  sort(x, n) {
    x.subarray(0, n).sort();
  },

  addDistances(x, stride, p, starts, k, from, to, sums) {
    let own = 0;
    for (let a = from; a < to; a++) {
      while (a >= starts[own + 1]!) own += 1;
      for (let g = own; g < k; g++) {
        const half = [0, 0];
        const first = Math.max(a + 1, starts[g]!);
        const end = starts[g + 1]!;
        let last = 0;
        for (let b = first; b < end; b++) {
          let sq = 0;
          for (let at = 0; at < p * stride; at += stride) sq += (x[at + a]! - x[at + b]!) ** 2;
          const distance = Math.sqrt(sq);
          sums[own * stride + b]! += distance;
          if (b === end - 1 && (end - first) % 2 === 1) last = distance;
          else half[(b - first) % 2]! += distance;
        }
        sums[g * stride + a]! += half[0]! + half[1]! + last;
      }
    }
  },
};

function sumInTwo(x: Float64Array, from: number, count: number): number {
  let [even, odd] = [0, 0];
  for (let at = from; at < from + count; at += 2) {
    even += x[at]!;
    if (at + 1 < from + count) odd += x[at + 1]!;
  }
  return even + odd;
}
