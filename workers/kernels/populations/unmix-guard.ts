import { KernelError } from '#kernels/kernel-error.ts';
import { requireFinite } from '#kernels/statistics/require-finite.ts';
import { checkHoleStarts, holeShiftTest } from '#kernels/tables/hole-shift.ts';
import type { PreparedSplitter } from './unmix-splitters.ts';

/** How much of the spread a split explains. */
export interface SplitEffect {
  /** Place of the best candidate of its splitter. */
  candidate: number;
  /** Share of the sum of squares between classes. */
  etaSquared: number;
  /** The same less what as many classes explain by chance; may be below 0. */
  epsilonSquared: number;
  /** Chance that any splitter or cut tried explains as much; what the guard allows for. */
  pAdjusted: number;
}

export interface UnmixGuard {
  /** One per splitter, in their order: its best candidate. */
  effects: SplitEffect[];
  shifts: number;
  enumerated: boolean;
}

export interface GuardOptions {
  seed: number;
  /** Random shifts when there are too many to list; 999 unless told. */
  draws?: number;
  onProgress?: (share: number) => void;
}

/**
 * Explained spread of every splitter with a guard against hunting: all splitters of a hole are shifted
 * round together, the best cut of each is sought again, and the greatest epsilon squared of all is
 * kept; p is the share of shifts whose greatest reaches a splitter's own.
 *
 * @param target Coordinates (ln grade, or component scores), n finite values each, rows in order down
 *   each hole; sums of squares are added over them.
 * @param splitters From `prepareSplitters`, at least one.
 * @throws {KernelError} `shape`; `not-finite`; `too-few-groups` without a splitter; `too-few-rows` when
 *   there are no more rows than classes; `constant` when nothing varies.
 * @see Westfall & Young (1993), Resampling-Based Multiple Testing, Wiley (from memory).
 */
export function unmixGuard(
  target: readonly Float64Array[],
  splitters: readonly PreparedSplitter[],
  holeStarts: Int32Array,
  options: GuardOptions,
): UnmixGuard {
  const n = checkHoleStarts(holeStarts);
  if (splitters.length === 0)
    throw new KernelError('too-few-groups', 'expected a splitter of two classes, found none');
  const centred = target.map((column) => centre(column, n));
  const total = centred.reduce((sum, column) => sum + column.reduce((s, v) => s + v * v, 0), 0);
  if (centred.length === 0 || !(total > 0))
    throw new KernelError('constant', 'expected values that vary, found none');
  const most = Math.max(...splitters.flatMap((s) => s.candidates.map((c) => c.classNames.length)));
  if (n <= most)
    throw new KernelError(
      'too-few-rows',
      `expected more rows than the ${most} classes, found ${n}`,
    );
  const sums = splitters.map(({ binSizes }) => new Float64Array(binSizes.length));
  const bestOf = (splitter: PreparedSplitter, at: number, source: Int32Array | null) =>
    bestCandidate(splitter, centred, total, sums[at]!, source);
  const best = splitters.map((splitter, at) => bestOf(splitter, at, null));
  let isFirst = true;
  const statistics = (source: Int32Array): Float64Array => {
    if (isFirst) {
      isFirst = false;
      return Float64Array.from(best, ({ epsilonSquared }) => epsilonSquared);
    }
    const greatest = splitters.reduce(
      (max, splitter, at) => Math.max(max, bestOf(splitter, at, source).epsilonSquared),
      -Infinity,
    );
    return new Float64Array(splitters.length).fill(greatest);
  };
  const { p, shifts, enumerated } = holeShiftTest(holeStarts, statistics, options);
  const effects = best.map((effect, at) => ({ ...effect, pAdjusted: p[at]! }));
  return { effects, shifts, enumerated };
}

function centre(column: Float64Array, n: number): Float64Array {
  if (column.length !== n)
    throw new KernelError(
      'shape',
      `expected ${n} values by the hole starts, found ${column.length}`,
    );
  requireFinite(column, 'values');
  const mean = column.reduce((sum, value) => sum + value / n, 0);
  return column.map((value) => value - mean);
}

/** The candidate of a splitter that explains most, its labels moved by `source`. */
function bestCandidate(
  { binOf, binSizes, candidates }: PreparedSplitter,
  centred: readonly Float64Array[],
  total: number,
  sums: Float64Array,
  source: Int32Array | null,
): Omit<SplitEffect, 'pAdjusted'> {
  const between = new Float64Array(candidates.length);
  const n = binOf.length;
  for (const column of centred) {
    sums.fill(0);
    for (let i = 0; i < n; i++) sums[binOf[source ? source[i]! : i]!]! += column[i]!;
    for (let k = 0; k < candidates.length; k++)
      between[k]! += squaresBetween(
        candidates[k]!.classOfBin,
        candidates[k]!.classNames.length,
        sums,
        binSizes,
      );
  }
  let best = { candidate: 0, etaSquared: 0, epsilonSquared: -Infinity };
  for (let k = 0; k < candidates.length; k++) {
    const etaSquared = Math.min(1, between[k]! / total);
    const classes = candidates[k]!.classNames.length;
    const epsilonSquared = 1 - ((n - 1) / (n - classes)) * (1 - etaSquared);
    if (epsilonSquared > best.epsilonSquared) best = { candidate: k, etaSquared, epsilonSquared };
  }
  return best;
}

function squaresBetween(
  classOfBin: Int32Array,
  classes: number,
  sums: Float64Array,
  sizes: Int32Array,
): number {
  let squares = 0;
  for (let k = 0; k < classes; k++) {
    let [sum, size] = [0, 0];
    for (let bin = 0; bin < sums.length; bin++) {
      if (classOfBin[bin] !== k) continue;
      sum += sums[bin]!;
      size += sizes[bin]!;
    }
    if (size > 0) squares += (sum * sum) / size;
  }
  return squares;
}
