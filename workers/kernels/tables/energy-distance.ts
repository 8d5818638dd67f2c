import { KernelError } from '#kernels/kernel-error.ts';
import { requireFinite } from '#kernels/statistics/require-finite.ts';
import { checkHoleStarts, holeShiftTest } from './hole-shift.ts';

/** Do two sets of points come from one distribution. */
export interface EnergyTest {
  /** 2 E|X-Y| - E|X-X'| - E|Y-Y'|; 0 only for the same distribution. */
  distance: number;
  /** By shifting labels round within holes. */
  p: number;
  shifts: number;
  enumerated: boolean;
  /** Rows of each set used. */
  used: { first: number; second: number };
}

export interface EnergyOptions {
  seed: number;
  draws?: number;
  /** Most rows of each set, taken at equal steps down the table; 150 unless told. */
  maxRows?: number;
  onProgress?: (share: number) => void;
}

/** Square matrix of Euclidean distances, row-major. */
function distancesOf(columns: readonly Float64Array[], rows: Int32Array): Float64Array {
  const n = rows.length;
  const out = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < i; j++) {
      let square = 0;
      for (const column of columns) square += (column[rows[i]!]! - column[rows[j]!]!) ** 2;
      out[i * n + j] = out[j * n + i] = Math.sqrt(square);
    }
  }
  return out;
}

/**
 * Energy distance of two sets of points; means run over all ordered pairs, a point with itself
 * included.
 *
 * @param first, second Points by coordinate: as many columns in both, finite.
 * @throws {KernelError} `shape`; `too-few-rows`; `not-finite`.
 * @see Szekely & Rizzo (2004), Testing for equal distributions in high dimension (from memory).
 */
export function energyDistance(
  first: readonly Float64Array[],
  second: readonly Float64Array[],
): number {
  if (first.length === 0 || first.length !== second.length)
    throw new KernelError(
      'shape',
      `expected the same coordinates, found ${first.length} and ${second.length}`,
    );
  const columns = first.map((column, k) => {
    const other = second[k]!;
    const joined = new Float64Array(column.length + other.length);
    joined.set(column);
    joined.set(other, column.length);
    return joined;
  });
  const [a, b] = [first[0]!.length, second[0]!.length];
  requireColumns(columns, a + b);
  requireFinite(first[0]!, 'first points');
  requireFinite(second[0]!, 'second points');
  const n = a + b;
  const rows = Int32Array.from({ length: n }, (_, i) => i);
  const isFirst = Uint8Array.from(rows, (i) => (i < a ? 1 : 0));
  const distances = distancesOf(columns, rows);
  return energyOf(distances, sumOf(distances), isFirst, rows);
}

function requireColumns(columns: readonly Float64Array[], n: number): void {
  for (const column of columns) {
    if (column.length !== n)
      throw new KernelError(
        'shape',
        `expected ${n} rows of every coordinate, found ${column.length}`,
      );
    requireFinite(column, 'coordinates');
  }
}

/** Energy distance of the first rows of a distance matrix against the others, labels from `source`. */
function energyOf(
  distances: Float64Array,
  all: number,
  isFirst: Uint8Array,
  source: Int32Array,
): number {
  const n = source.length;
  const [first, second] = [new Int32Array(n), new Int32Array(n)];
  let [a, b] = [0, 0];
  for (let i = 0; i < n; i++) {
    if (isFirst[source[i]!] === 1) first[a++] = i;
    else second[b++] = i;
  }
  const insideA = sumAmong(distances, n, first, a);
  const insideB = sumAmong(distances, n, second, b);
  return (all - insideA - insideB) / (a * b) - insideA / (a * a) - insideB / (b * b);
}

const sumOf = (values: Float64Array): number => values.reduce((sum, value) => sum + value, 0);

/** Sum of distances over ordered pairs of the first `count` rows listed. */
function sumAmong(distances: Float64Array, n: number, rows: Int32Array, count: number): number {
  let sum = 0;
  for (let i = 1; i < count; i++) {
    const start = rows[i]! * n;
    for (let j = 0; j < i; j++) sum += distances[start + rows[j]!]!;
  }
  return 2 * sum;
}

/**
 * Energy test of two codes by shifting labels round within each hole, among the rows of both codes.
 * Where a hole holds one of them only, its shifts change nothing, so codes that never share a hole
 * cannot be told apart by this test (p 1).
 *
 * @param columns Coordinates of n rows, in order down each hole.
 * @param isFirst For each row 1 (first code), 0 (second) or -1 (neither).
 * @param holeStarts First row of each hole, then n.
 * @throws {KernelError} `shape`; `too-few-rows` when a code has no row; `not-finite`; `bad-parameter`.
 */
export function energyTest(
  columns: readonly Float64Array[],
  isFirst: Int8Array,
  holeStarts: Int32Array,
  { maxRows = 150, ...options }: EnergyOptions,
): EnergyTest {
  const n = checkHoleStarts(holeStarts);
  if (columns.length === 0 || isFirst.length !== n || columns.some((c) => c.length !== n))
    throw new KernelError(
      'shape',
      `expected ${n} labels and rows of every coordinate, found ${isFirst.length} labels`,
    );
  if (!(maxRows >= 1))
    throw new KernelError('bad-parameter', `expected at least one row a code, found ${maxRows}`);
  const first = stepped(rowsWith(isFirst, 1), maxRows);
  const second = stepped(rowsWith(isFirst, 0), maxRows);
  if (first.length === 0 || second.length === 0)
    throw new KernelError('too-few-rows', 'expected rows of both codes, found none of one');
  const rows = Int32Array.from([...first, ...second]).sort();
  requireColumns(
    columns.map((column) => Float64Array.from(rows, (row) => column[row]!)),
    rows.length,
  );
  const labels = Uint8Array.from(rows, (row) => isFirst[row]!);
  const starts = holeStarts.map((start) => rows.filter((row) => row < start).length);
  const distances = distancesOf(columns, rows);
  const all = sumOf(distances);
  const statistics = (source: Int32Array) =>
    Float64Array.of(energyOf(distances, all, labels, source));
  const { p, observed, shifts, enumerated } = holeShiftTest(starts, statistics, options);
  return {
    distance: Math.max(0, observed[0]!),
    p: p[0]!,
    shifts,
    enumerated,
    used: { first: first.length, second: second.length },
  };
}

const rowsWith = (labels: Int8Array, wanted: number): number[] =>
  [...labels.keys()].filter((row) => labels[row] === wanted);

function stepped(rows: number[], limit: number): number[] {
  if (rows.length <= limit) return rows;
  return Array.from({ length: limit }, (_, i) => rows[Math.floor((i * rows.length) / limit)]!);
}
