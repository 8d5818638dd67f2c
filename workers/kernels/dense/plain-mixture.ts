import { expOfNegative } from '#kernels/exp.ts';
import type { DenseMath, MixtureRoom, MixtureTables } from './dense-math.ts';
import { lnByTable } from './plain-logarithm.ts';
import { addCrossProducts } from './plain-products.ts';

/** ln of a density ratio too small to change a sum of doubles. */
const NEGLIGIBLE = -37;

/** Squared distance of row r to group c in units of its spread. */
function squaresOf({ x, stride, p }: MixtureRoom, { isAxial, means, whiteners }: MixtureTables, c: number, r: number): number {
  const deviation = (j: number): number => x[j * stride + r]! - means[c * p + j]!;
  let squares = 0;
  let at = (c * (p * (p + 1))) / 2;
  for (let a = 0; a < p; a++) {
    let sum = isAxial ? whiteners[at + a]! * deviation(a) : 0;
    if (!isAxial) for (let b = 0; b <= a; b++) sum += whiteners[at + b]! * deviation(b);
    at += a + 1;
    squares += sum * sum;
  }
  return squares;
}

/** The part of `DenseMath` that works on normal mixtures, in plain loops. */
export const plainMixture: Pick<DenseMath, 'mixtureShares' | 'addGroupMoments'> = {
  mixtureShares(block, count, density) {
    const { stride, shares, logDensity } = block;
    const { k, logScales } = density;
    for (let r = 0; r < count; r++) {
      let top = -Infinity;
      for (let c = 0; c < k; c++) {
        const log = logScales[c]! - 0.5 * squaresOf(block, density, c, r);
        shares[c * stride + r] = log;
        if (top < log) top = log;
      }
      let total = 0;
      for (let at = r; at < k * stride; at += stride) {
        const less = shares[at]! - top;
        shares[at] = less < NEGLIGIBLE ? 0 : expOfNegative(less);
        total += shares[at]!;
      }
      logDensity[r] = top + lnByTable(total);
      const inverse = 1 / total;
      for (let at = r; at < k * stride; at += stride) shares[at]! *= inverse;
    }
  },

  addGroupMoments(block, count, c, { means }, { first, squares, cross, nCols }) {
    const { x, stride, p, shares, rows, roots, deviations } = block;
    let [used, mass] = [0, 0];
    for (let r = 0; r < count; r++) {
      const share = shares[c * stride + r]!;
      if (share === 0) continue;
      mass += share;
      rows[used] = r;
      roots[used++] = Math.sqrt(share);
    }
    for (let j = 0; j < p; j++) {
      const [sum, square] = [[0, 0], [0, 0]];
      for (let t = 0; t < used; t++) {
        const scaled = roots[t]! * (x[j * stride + rows[t]!]! - means[c * p + j]!);
        deviations[j * stride + t] = scaled;
        sum[t % 2]! += roots[t]! * scaled;
        square[t % 2]! += scaled * scaled;
      }
      first[c * p + j]! += sum[0]! + sum[1]!;
      squares[c * p + j]! += square[0]! + square[1]!;
    }
    const size = nCols * nCols;
    if (cross) addCrossProducts(deviations, stride, used, nCols, cross.subarray(c * size, (c + 1) * size));
    return mass;
  },
};
