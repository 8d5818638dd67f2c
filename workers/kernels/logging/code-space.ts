import { inverse, Matrix } from 'ml-matrix';
import { KernelError } from '#kernels/kernel-error.ts';
import { checkCategory, NOT_LOGGED, type Category } from '#kernels/tables/category.ts';

/** Where logging codes lie in the space of chemistry. */
export interface CodeSpace {
  /** Codes with enough rows, in the order of their levels. */
  levels: string[];
  /** Rows of each. */
  sizes: number[];
  /** Codes with some rows but too few. */
  tooFew: { level: string; rows: number }[];
  /** Row-major (levels, coordinates): means. */
  centres: Float64Array;
  /** Place among `levels` of each row; -1 for the rest. */
  codeOf: Int32Array;
  /** Pooled covariance within codes, denominator n - K, row-major. */
  within: Float64Array;
  nCoordinates: number;
}

/** Fewest rows of a code to be tested. */
export const MIN_CODE_ROWS = 20;
/** Added to the diagonal of the pooled covariance, as a share of its mean, so that it inverts. */
const RIDGE = 1e-6;

/**
 * Centres and pooled spread of logging codes.
 *
 * @param coordinates Isometric log-ratio coordinates (or component scores), n finite values each.
 * @param codes A code of each composite that one code dominates, or NOT_LOGGED.
 * @throws {KernelError} `shape`; `bad-parameter`; `not-finite` with { row, col }; `too-few-groups` when
 *   fewer than two codes have `minRows` rows; `too-few-rows` when there are no more rows than codes.
 */
export function codeSpace(
  coordinates: readonly Float64Array[],
  codes: Category,
  minRows: number = MIN_CODE_ROWS,
): CodeSpace {
  const n = codes.codes.length;
  requireCoordinates(coordinates, n);
  checkCategory(codes, n, 'logging');
  const rowsOf = codes.levels.map(() => 0);
  for (const code of codes.codes) if (code !== NOT_LOGGED) rowsOf[code]! += 1;
  const kept = [...codes.levels.keys()].filter((code) => rowsOf[code]! >= Math.max(1, minRows));
  if (kept.length < 2)
    throw new KernelError(
      'too-few-groups',
      `expected 2 or more codes of ${minRows} rows, found ${kept.length}`,
    );
  const place = Int32Array.from(codes.levels, (_, code) => kept.indexOf(code));
  const codeOf = codes.codes.map((code) => (code === NOT_LOGGED ? -1 : place[code]!));
  const sizes = kept.map((code) => rowsOf[code]!);
  const centres = meansOf(coordinates, codeOf, sizes);
  return {
    levels: kept.map((code) => codes.levels[code]!),
    sizes,
    tooFew: codes.levels.flatMap((level, code) =>
      rowsOf[code]! > 0 && place[code]! < 0 ? [{ level, rows: rowsOf[code]! }] : [],
    ),
    centres,
    codeOf,
    within: pooledCovariance(coordinates, codeOf, centres, sizes),
    nCoordinates: coordinates.length,
  };
}

/** @throws {KernelError} `shape`; `not-finite` with { row, col }. */
export function requireCoordinates(coordinates: readonly Float64Array[], n: number): void {
  if (coordinates.length === 0 || coordinates.some((column) => column.length !== n))
    throw new KernelError('shape', `expected ${n} rows of one or more coordinates`);
  coordinates.forEach((column, col) => {
    const row = column.findIndex((value) => !Number.isFinite(value));
    if (row < 0) return;
    const message = `expected finite coordinates, found ${column[row]} in row ${row}, coordinate ${col}`;
    throw new KernelError('not-finite', message, { row, col });
  });
}

/** Row-major (groups, coordinates) means; rows of group -1 are left out. */
export function meansOf(
  coordinates: readonly Float64Array[],
  groupOf: Int32Array,
  sizes: readonly number[],
): Float64Array {
  const p = coordinates.length;
  const means = new Float64Array(sizes.length * p);
  for (let k = 0; k < p; k++) {
    const column = coordinates[k]!;
    for (let row = 0; row < groupOf.length; row++) {
      const group = groupOf[row]!;
      if (group >= 0) means[group * p + k]! += column[row]!;
    }
  }
  for (let at = 0; at < means.length; at++) means[at]! /= sizes[Math.floor(at / p)]!;
  return means;
}

function pooledCovariance(
  coordinates: readonly Float64Array[],
  groupOf: Int32Array,
  centres: Float64Array,
  sizes: readonly number[],
): Float64Array {
  const p = coordinates.length;
  const freedom = sizes.reduce((sum, size) => sum + size, 0) - sizes.length;
  if (freedom < 1)
    throw new KernelError('too-few-rows', `expected more rows than the ${sizes.length} codes`);
  const sums = new Float64Array(p * p);
  const off = new Float64Array(p);
  groupOf.forEach((group, row) => {
    if (group < 0) return;
    for (let k = 0; k < p; k++) off[k] = coordinates[k]![row]! - centres[group * p + k]!;
    for (let i = 0; i < p; i++) for (let j = 0; j < p; j++) sums[i * p + j]! += off[i]! * off[j]!;
  });
  return sums.map((sum) => sum / freedom);
}

/** Euclidean distances of centres: Aitchison distances when coordinates are isometric. Row-major. */
export function centreDistances({ centres, levels, nCoordinates: p }: CodeSpace): Float64Array {
  return betweenCentres(centres, levels.length, p, (off) => Math.hypot(...off));
}

/**
 * Distances of centres in units of the pooled spread within codes. Row-major.
 *
 * @throws {KernelError} `singular` when codes have no spread inside at all.
 */
export function standardisedDistances({
  centres,
  levels,
  within,
  nCoordinates: p,
}: CodeSpace): Float64Array {
  let trace = 0;
  for (let k = 0; k < p; k++) trace += within[k * p + k]!;
  if (!(trace > 0)) throw new KernelError('singular', 'expected codes with some spread inside');
  const rows = Array.from({ length: p }, (_, i) =>
    Array.from(
      { length: p },
      (_col, j) => within[i * p + j]! + (i === j ? (RIDGE * trace) / p : 0),
    ),
  );
  const precision = inverse(new Matrix(rows));
  return betweenCentres(centres, levels.length, p, (off) => {
    let square = 0;
    for (let i = 0; i < p; i++)
      for (let j = 0; j < p; j++) square += off[i]! * precision.get(i, j) * off[j]!;
    return Math.sqrt(Math.max(0, square));
  });
}

function betweenCentres(
  centres: Float64Array,
  count: number,
  p: number,
  norm: (off: number[]) => number,
): Float64Array {
  const out = new Float64Array(count * count);
  for (let a = 0; a < count; a++) {
    for (let b = 0; b < a; b++) {
      const off = Array.from({ length: p }, (_, k) => centres[a * p + k]! - centres[b * p + k]!);
      out[a * count + b] = out[b * count + a] = norm(off);
    }
  }
  return out;
}
