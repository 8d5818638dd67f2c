import { KernelError } from '#kernels/kernel-error.ts';
import { seededRandom } from '#kernels/random.ts';

export interface HoleShiftOptions {
  seed: number;
  /** Random shifts when there are too many to list; 999 unless told. */
  draws?: number;
  onProgress?: (share: number) => void;
}

/** P values by shifting labels round within each hole, one per statistic asked for. */
export interface HoleShiftTest {
  p: Float64Array;
  observed: Float64Array;
  /** Shifts (without the observed one when drawn at random) that reach the observed value. */
  reached: Int32Array;
  /** Shifts tried: all of them when `enumerated`, else the random draws. */
  shifts: number;
  enumerated: boolean;
}

const ENUMERATE_BELOW = 1000;
const DRAWS = 999;

/**
 * Permutation test for labels that are alike from one interval to the next: each hole's labels are
 * turned round by a random number of rows, which keeps their runs and breaks their tie to the rest.
 * With fewer than 1000 possible shifts all are listed: p = share reaching the observed value. Else
 * p = (1 + number reaching it) / (draws + 1). Columns tested together share one shift per hole.
 *
 * @param holeStarts First row of each hole, then n: ascending from 0, so nHoles + 1 values. Rows are
 *   in order down each hole.
 * @param statistics Called with `source`: the label of row i moves to `label[source[i]]`. Returns
 *   one value per statistic, large when the labels matter, always as many. The first call has
 *   source[i] = i. `source` is reused between calls.
 * @throws {KernelError} `shape` at hole starts out of order; `bad-parameter` at draws < 1;
 *   `not-finite` when an observed statistic is NaN.
 */
export function holeShiftTest(
  holeStarts: Int32Array,
  statistics: (source: Int32Array) => Float64Array,
  { seed, draws = DRAWS, onProgress }: HoleShiftOptions,
): HoleShiftTest {
  const n = checkHoleStarts(holeStarts);
  if (!(draws >= 1)) throw new KernelError('bad-parameter', `expected draws >= 1, found ${draws}`);
  const source = Int32Array.from({ length: n }, (_, i) => i);
  const observed = statistics(source).slice();
  observed.forEach((value, statistic) => {
    if (Number.isNaN(value))
      throw new KernelError('not-finite', `statistic ${statistic} is NaN`, { statistic });
  });
  const reached = new Int32Array(observed.length);
  const possible = countShifts(holeStarts);
  const enumerated = possible < ENUMERATE_BELOW;
  const shifts = enumerated ? possible : draws;
  const random = seededRandom(seed);
  for (let draw = 0; draw < shifts; draw++) {
    if (enumerated) listShift(holeStarts, draw, source);
    else drawShift(holeStarts, (limit) => random.below(limit), source);
    const values = statistics(source);
    observed.forEach((value, k) => {
      if (values[k]! >= value - 1e-12 * Math.abs(value)) reached[k]! += 1;
    });
    onProgress?.((draw + 1) / shifts);
  }
  const p = Float64Array.from(reached, (count) =>
    enumerated ? count / shifts : (1 + count) / (shifts + 1),
  );
  return { p, observed, reached, shifts, enumerated };
}

/**
 * Number of rows of a table laid out by hole.
 *
 * @throws {KernelError} `shape` unless the starts ascend from 0 and name at least one hole.
 */
export function checkHoleStarts(holeStarts: Int32Array): number {
  if (holeStarts.length < 2 || holeStarts[0] !== 0) {
    throw new KernelError('shape', 'expected hole starts from 0 with the row count last');
  }
  for (let hole = 1; hole < holeStarts.length; hole++) {
    if (holeStarts[hole]! < holeStarts[hole - 1]!) {
      throw new KernelError(
        'shape',
        `expected hole starts to ascend, found a step back at ${hole}`,
        { hole },
      );
    }
  }
  return holeStarts[holeStarts.length - 1]!;
}

/** Product of the holes' row counts, or the enumeration limit as soon as it is passed. */
function countShifts(holeStarts: Int32Array): number {
  let product = 1;
  for (let hole = 0; hole + 1 < holeStarts.length && product < ENUMERATE_BELOW; hole++) {
    product *= Math.max(1, holeStarts[hole + 1]! - holeStarts[hole]!);
  }
  return product;
}

/** Shift number `index` of the list: its digits in the mixed base of the holes' row counts. */
function listShift(holeStarts: Int32Array, index: number, source: Int32Array): void {
  let rest = index;
  for (let hole = 0; hole + 1 < holeStarts.length; hole++) {
    const rows = holeStarts[hole + 1]! - holeStarts[hole]!;
    if (rows === 0) continue;
    turn(holeStarts[hole]!, rows, rest % rows, source);
    rest = Math.floor(rest / rows);
  }
}

function drawShift(
  holeStarts: Int32Array,
  below: (limit: number) => number,
  source: Int32Array,
): void {
  for (let hole = 0; hole + 1 < holeStarts.length; hole++) {
    const rows = holeStarts[hole + 1]! - holeStarts[hole]!;
    if (rows > 0) turn(holeStarts[hole]!, rows, below(rows), source);
  }
}

function turn(start: number, rows: number, by: number, source: Int32Array): void {
  const kept = rows - by;
  for (let i = 0; i < kept; i++) source[start + i] = start + by + i;
  for (let i = kept; i < rows; i++) source[start + i] = start + i - kept;
}
