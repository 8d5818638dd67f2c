import { KernelError } from '#kernels/kernel-error.ts';
import type { FitClassifier } from '#kernels/logging/cross-validate.ts';
import { answerRows, classMoments, isComplete, whiten } from './class-moments.ts';
import { coordinatesFor, type Coordinates } from './linear-discriminant.ts';

/** Neighbours asked unless said. */
export const DEFAULT_NEIGHBOURS = 15;

/**
 * k nearest neighbours in coordinates of unit spread within classes: P_k is the share of the class
 * among the neighbours over its share of the training rows, renormalised, so that a common class has
 * no advantage. Of rows at one distance the first in order counts; with fewer training rows than k all
 * of them answer. Time grows with training rows times asked rows.
 *
 * @returns A classifier; rows with a missing coordinate answer NaN.
 * @throws {KernelError} `bad-parameter` unless k is a whole number >= 1; when fitted: those of
 *   `classMoments`.
 * @see Cover & Hart (1967), IEEE Trans. Inf. Theory 13 (from memory).
 */
export function nearestNeighbours(
  coordinates: Coordinates,
  k: number = DEFAULT_NEIGHBOURS,
): FitClassifier {
  if (!(k >= 1 && Math.floor(k) === k))
    throw new KernelError('bad-parameter', `expected k a whole number >= 1, found ${k}`, { k });
  return (rows, classOf, nClasses) => {
    const columns = coordinatesFor(coordinates, rows);
    const moments = classMoments({ columns, rows, classOf, nClasses });
    const { p, sizes } = moments;
    const used = [...rows.keys()].filter((i) => isComplete(columns, rows[i]!));
    const known = new Float64Array(used.length * p);
    used.forEach((i, at) => whiten(moments, columns, rows[i]!, known, at * p));
    const classes = Int32Array.from(used, (i) => classOf[i]!);
    const neighbours = new Neighbours(Math.min(k, used.length));
    return (asked) =>
      answerRows(moments, columns, asked, (z, shares) => {
        neighbours.find(known, z);
        shares.fill(0);
        for (const at of neighbours.rows) shares[classes[at]!]! += 1 / sizes[classes[at]!]!;
        const total = shares.reduce((sum, share) => sum + share, 0);
        for (let c = 0; c < nClasses; c++) shares[c]! /= total;
      });
  };
}

/** The nearest of a table of rows, kept in order of distance. */
class Neighbours {
  readonly rows: Int32Array;
  private readonly squares: Float64Array;

  constructor(count: number) {
    this.rows = new Int32Array(count);
    this.squares = new Float64Array(count);
  }

  /** Finds the rows of a row-major table nearest to z. */
  find(table: Float64Array, z: Float64Array): void {
    const { rows, squares } = this;
    const p = z.length;
    const last = rows.length - 1;
    squares.fill(Infinity);
    for (let row = 0, at = 0; at < table.length; row++, at += p) {
      let sum = 0;
      for (let j = 0; j < p; j++) sum += (table[at + j]! - z[j]!) ** 2;
      if (sum >= squares[last]!) continue;
      let place = last;
      for (; place > 0 && squares[place - 1]! > sum; place--) {
        squares[place] = squares[place - 1]!;
        rows[place] = rows[place - 1]!;
      }
      squares[place] = sum;
      rows[place] = row;
    }
  }
}
