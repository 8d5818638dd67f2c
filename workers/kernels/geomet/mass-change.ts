import { KernelError } from '#kernels/kernel-error.ts';
import { quantiles } from '#kernels/statistics/quantile.ts';

/** What the altered rows are compared with. */
export interface Precursor {
  elements: readonly string[];
  /** Row-major (nRows, elements) of the least altered rows of the unit, ppm; NaN where not assayed. */
  parts: Float64Array;
  /** Detection limit of each element, ppm: gains on traces near it are not given as a ratio. */
  limitsPpm: readonly number[];
}

/** Change of one altered row against its precursor. */
export interface MassChange {
  /** Final mass per mass of precursor is `enrichment`: C immobile before / after. */
  enrichment: number;
  /** enrichment - 1: the change of the whole. */
  total: number;
  /** Largest over smallest enrichment of the immobile elements; 1 with one of them. */
  spread: number;
  /** Enrichment outside .3 to 3: hardly the same rock. */
  isDoubtful: boolean;
  /** (C after x enrichment - C before) / C before; NaN where not assayed or before is near its limit. */
  relativeGains: Float64Array;
  /** C after x enrichment - C before, ppm of precursor mass. */
  gainsPpm: Float64Array;
}

const LEAST_PRECURSORS = 10;
/** Times the detection limit under which a precursor grade gives no ratio. */
const SURE_MULTIPLE = 10;
const DOUBTFUL = { low: 0.3, high: 3 };

/**
 * Mass change of altered rows by immobile elements against the median of a single precursor.
 *
 * @param altered Row-major (nRows, elements), ppm, in the precursor's order; NaN where not assayed.
 * @param immobile Names of the immobile elements; with several the enrichment is their geometric mean.
 * @returns One per row; null where an immobile element is not assayed.
 * @throws {KernelError} `too-few-rows` under 10 precursor rows; `shape`; `bad-parameter` at an element
 *   or limit that is none; `not-positive` with { row } at an immobile grade <= 0.
 * @see Gresens (1967), Chemical Geology 2, 47-65; Grant (1986), Economic Geology 81, 1976-1982; MacLean
 *   & Barrett (1993) (from memory).
 */
export function massChange(
  precursor: Precursor,
  altered: Float64Array,
  immobile: readonly string[],
): (MassChange | null)[] {
  const before = precursorMedians(precursor);
  const n = before.length;
  if (altered.length % n !== 0) {
    throw new KernelError('shape', `${altered.length} grades do not fill rows of ${n}`);
  }
  altered.forEach((value, i) => {
    if (value >= 0 || Number.isNaN(value)) return;
    const row = Math.floor(i / n);
    throw new KernelError('bad-parameter', `expected ppm >= 0, found ${value} in row ${row}`, {
      row,
    });
  });
  const columns = immobile.map((element) => {
    const column = precursor.elements.indexOf(element);
    if (column >= 0 && before[column]! > 0) return column;
    const message = `expected an immobile element found in the precursor, found ${element}`;
    throw new KernelError('bad-parameter', message);
  });
  if (columns.length === 0) {
    throw new KernelError('bad-parameter', 'expected an immobile element, found none');
  }
  return Array.from({ length: altered.length / n }, (_, row) =>
    changeOf(altered.subarray(row * n, (row + 1) * n), before, columns, precursor.limitsPpm, row),
  );
}

function precursorMedians({ elements, parts, limitsPpm }: Precursor): Float64Array {
  const n = elements.length;
  if (n === 0 || parts.length % n !== 0 || limitsPpm.length !== n) {
    const found = `${parts.length} grades and ${limitsPpm.length} limits`;
    throw new KernelError(
      'shape',
      `expected rows of ${n} elements and as many limits, found ${found}`,
    );
  }
  const nRows = parts.length / n;
  if (nRows < LEAST_PRECURSORS) {
    const message = `expected at least ${LEAST_PRECURSORS} least altered rows, found ${nRows}`;
    throw new KernelError('too-few-rows', message);
  }
  if (!limitsPpm.every((limit) => limit >= 0 && limit < Infinity)) {
    const message = `expected limits >= 0 ppm, found ${limitsPpm.join(', ')}`;
    throw new KernelError('bad-parameter', message);
  }
  return Float64Array.from(elements, (element, column) => {
    const grades = parts.filter((value, i) => i % n === column && !Number.isNaN(value));
    if (!grades.every((value) => value >= 0 && value < Infinity)) {
      throw new KernelError('bad-parameter', `expected ppm >= 0 of ${element} in the precursor`);
    }
    if (grades.length < LEAST_PRECURSORS) return NaN;
    return quantiles(grades, [0.5])[0]!;
  });
}

function changeOf(
  after: Float64Array,
  before: Float64Array,
  immobile: readonly number[],
  limitsPpm: readonly number[],
  row: number,
): MassChange | null {
  const logs: number[] = [];
  for (const column of immobile) {
    const grade = after[column]!;
    if (Number.isNaN(grade)) return null;
    if (!(grade > 0 && grade < Infinity)) {
      const message = `expected an immobile grade > 0, found ${grade} in row ${row}`;
      throw new KernelError('not-positive', message, { row });
    }
    logs.push(Math.log(before[column]! / grade));
  }
  const enrichment = Math.exp(logs.reduce((sum, log) => sum + log, 0) / logs.length);
  const gainsPpm = after.map((grade, column) => grade * enrichment - before[column]!);
  return {
    enrichment,
    total: enrichment - 1,
    spread: Math.exp(Math.max(...logs) - Math.min(...logs)),
    isDoubtful: enrichment < DOUBTFUL.low || enrichment > DOUBTFUL.high,
    relativeGains: gainsPpm.map((gain, column) => {
      const isSure = before[column]! > 0 && before[column]! >= SURE_MULTIPLE * limitsPpm[column]!;
      return isSure ? gain / before[column]! : NaN;
    }),
    gainsPpm,
  };
}
