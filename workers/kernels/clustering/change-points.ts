import { KernelError } from '#kernels/kernel-error.ts';
import { quantiles } from '#kernels/statistics/quantile.ts';
import { pelt } from './pelt.ts';

/** Input of `changePoints`. */
export interface ChangePointInput {
  /** p columns (scores or ilr coordinates) of n rows, hole by hole, depth ascending; NaN ends a stretch. */
  columns: readonly Float64Array[];
  /** Sequence of each row, rows of one sequence together (`downHoleSequences`); never crossed. */
  sequence: ArrayLike<number>;
  /** Rows of a segment at least, default 2. */
  minLength?: number | undefined;
  /** Cost of a change, > 0; default (p + 1) ln n with the n rows of the stretch. */
  penalty?: number | undefined;
  /** False leaves the columns in their own unit; default true: divided by their noise. */
  scaled?: boolean | undefined;
}

/** Where the mean changes down the holes. */
export interface ChangePoints {
  /** Segment of each row, from 0 down all holes; -1 where a coordinate is missing. */
  segmentOf: Int32Array;
  segments: number;
  /** Sum over stretches of the cost plus the penalties. */
  objective: number;
  /** Noise of each column; 0 = constant from row to row, left out; 1 when not scaled. */
  noise: Float64Array;
  notes: string[];
}

/** Median absolute deviation of a standard normal. */
const NORMAL_MAD = 0.67449;
/** Noise under this share of the largest step is rounding. */
const ROUNDING = 1e-12;

/**
 * Change points of the mean of several columns, each stretch of core on its own. Columns are divided
 * by their noise MAD(Δx) / (.67449 √2), the MAD about the median of the steps Δx from row to row.
 *
 * @throws {KernelError} `too-few-parts`, `shape`, `not-finite`, `bad-parameter`.
 */
export function changePoints(input: ChangePointInput): ChangePoints {
  const { columns, sequence, minLength = 2, penalty, scaled = true } = input;
  requireInput(input, minLength);
  const stretches = stretchesOf(columns, sequence);
  const noise = Float64Array.from(columns, (column) => (scaled ? noiseOf(column, stretches) : 1));
  const used = columns
    .map((column, j) => ({ column, noise: noise[j]! }))
    .filter((item) => item.noise > 0);
  const p = used.length;
  const segmentOf = new Int32Array(sequence.length).fill(-1);
  let [segments, objective] = [0, 0];
  for (const [start, end] of stretches) {
    const n = end - start;
    const points = new Float64Array(n * p);
    for (const [j, item] of used.entries()) {
      const first = item.column[start]!; // relative to it, so that running sums stay small
      for (let i = 0; i < n; i++)
        points[i * p + j] = (item.column[start + i]! - first) / item.noise;
    }
    const found =
      p > 0
        ? pelt(points, n, p, penalty ?? (p + 1) * Math.log(n), minLength)
        : { ends: [n], objective: 0 };
    objective += found.objective;
    let from = 0;
    for (const to of found.ends) {
      segmentOf.fill(segments, start + from, start + to);
      segments += 1;
      from = to;
    }
  }
  return { segmentOf, segments, objective, noise, notes: notesOf(columns.length, p) };
}

function notesOf(all: number, used: number): string[] {
  if (used === all) return [];
  const rest = used === 0 ? ': no change can be found' : '';
  return [
    `${all - used} of ${all} columns hardly change from row to row (noise 0) and were left out${rest}`,
  ];
}

function requireInput({ columns, sequence, penalty }: ChangePointInput, minLength: number): void {
  if (columns.length === 0) throw new KernelError('too-few-parts', 'expected at least one column');
  for (const [col, column] of columns.entries()) {
    if (column.length !== sequence.length)
      throw new KernelError(
        'shape',
        `column ${col} has ${column.length} rows, expected ${sequence.length}`,
        { col },
      );
    const row = column.findIndex((value) => Math.abs(value) > 1e100);
    if (row >= 0)
      throw new KernelError(
        'not-finite',
        `expected a coordinate up to 1e100, found ${column[row]} in row ${row}, column ${col}`,
        { row, col },
      );
  }
  if (!(minLength >= 1 && Math.floor(minLength) === minLength))
    throw new KernelError(
      'bad-parameter',
      `expected minLength a whole number >= 1, found ${minLength}`,
    );
  if (penalty !== undefined && !(penalty > 0 && penalty < Infinity))
    throw new KernelError('bad-parameter', `expected a penalty > 0, found ${penalty}`);
}

/** Unbroken stretches of complete rows as [start, end). */
function stretchesOf(
  columns: readonly Float64Array[],
  sequence: ArrayLike<number>,
): [number, number][] {
  const stretches: [number, number][] = [];
  for (let row = 0; row < sequence.length; row++) {
    if (columns.some((column) => Number.isNaN(column[row]!))) continue;
    const open = stretches[stretches.length - 1];
    if (open?.[1] === row && sequence[row] === sequence[row - 1]) open[1] = row + 1;
    else stretches.push([row, row + 1]);
  }
  return stretches;
}

function noiseOf(column: Float64Array, stretches: readonly [number, number][]): number {
  const steps: number[] = [];
  for (const [start, end] of stretches)
    for (let row = start + 1; row < end; row++) steps.push(column[row]! - column[row - 1]!);
  if (steps.length === 0) return 0;
  const [median = 0] = quantiles(steps, [0.5]);
  const [deviation = 0] = quantiles(
    steps.map((step) => Math.abs(step - median)),
    [0.5],
  );
  const largest = steps.reduce((most, step) => Math.max(most, Math.abs(step)), 0);
  // Noise that only rounding makes is none: dividing by it would blow every step up.
  return deviation > ROUNDING * largest ? deviation / (NORMAL_MAD * Math.SQRT2) : 0;
}

/**
 * One label per segment: that of the centroid nearest to the segment's mean (the first on a tie), so
 * that contacts are clean.
 *
 * @param segmentOf Segment of each row, -1 = none (`changePoints`).
 * @param centroids Row-major, shape (K, p), in the unit of the columns.
 * @returns 1..K per row; 0 without a segment.
 * @throws {KernelError} `shape`.
 */
export function labelSegments(
  columns: readonly Float64Array[],
  segmentOf: Int32Array,
  centroids: Float64Array,
): Uint16Array {
  const p = columns.length;
  if (p === 0 || centroids.length === 0 || centroids.length % p !== 0)
    throw new KernelError(
      'shape',
      `${centroids.length} centroid coordinates do not fill rows of ${p}`,
    );
  const segments = segmentOf.reduce((most, segment) => Math.max(most, segment + 1), 0);
  const mean = new Float64Array(segments * p);
  const rows = new Uint32Array(segments);
  segmentOf.forEach((segment, row) => {
    if (segment < 0) return;
    rows[segment]! += 1;
    for (let j = 0; j < p; j++)
      mean[segment * p + j]! += (columns[j]![row]! - mean[segment * p + j]!) / rows[segment]!;
  });
  const labels = Uint16Array.from(
    { length: segments },
    (_, segment) => nearest(mean, segment, centroids, p) + 1,
  );
  return Uint16Array.from(segmentOf, (segment) => (segment < 0 ? 0 : labels[segment]!));
}

function nearest(mean: Float64Array, segment: number, centroids: Float64Array, p: number): number {
  let best = 0;
  let least = Infinity;
  for (let c = 0; c < centroids.length / p; c++) {
    let squares = 0;
    for (let j = 0; j < p; j++) squares += (mean[segment * p + j]! - centroids[c * p + j]!) ** 2;
    if (squares >= least) continue;
    best = c;
    least = squares;
  }
  return best;
}
