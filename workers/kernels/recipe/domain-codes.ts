import { KernelError } from '#kernels/kernel-error.ts';
import {
  checkCategory,
  compareCodePoints,
  NOT_LOGGED,
  type Category,
} from '#kernels/tables/category.ts';

/** Code of an interval that belongs to no domain. */
export const UNASSIGNED = 'UNASSIGNED';

/** Metres and intervals under one code. */
export interface CodeMetres {
  code: string;
  intervals: number;
  metres: number;
}

/** Sorted list of codes in use, with UNASSIGNED among them. */
export function codeLevels(codes: Iterable<string>): string[] {
  return [...new Set([...codes, UNASSIGNED])].sort(compareCodePoints);
}

/**
 * Metres of each code; they add up to the metres of the intervals.
 *
 * @param domains A code for every interval.
 * @param lengthsM Interval lengths, >= 0; 0 for samples without length.
 * @throws {KernelError} `shape`; `bad-parameter` with { row } at an interval without a code or with
 *   a length that is none.
 */
export function metresByCode(domains: Category, lengthsM: Float64Array): CodeMetres[] {
  checkCategory(domains, lengthsM.length, 'domain');
  const totals = domains.levels.map((code) => ({ code, intervals: 0, metres: 0 }));
  lengthsM.forEach((length, row) => {
    const code = domains.codes[row]!;
    if (code === NOT_LOGGED || !(length >= 0 && length < Infinity)) {
      const message = `expected a code and a length >= 0 m in row ${row}, found ${code}, ${length}`;
      throw new KernelError('bad-parameter', message, { row });
    }
    totals[code]!.intervals += 1;
    totals[code]!.metres += length;
  });
  return totals;
}
