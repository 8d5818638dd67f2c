import { KernelError } from '#kernels/kernel-error.ts';
import { weightedMoments } from '#kernels/statistics/weighted-moments.ts';
import {
  checkCategory,
  compareCodePoints,
  NOT_LOGGED,
  type Category,
} from '#kernels/tables/category.ts';

/** Length-weighted grade of one domain. */
export interface DomainGrade {
  intervals: number;
  /** Metres with a grade. */
  metres: number;
  mean: number;
  /** Null with a single interval, or a mean of 0. */
  cv: number | null;
  /** Sum of length times grade. */
  metal: number;
}

/** Grade of one domain in two releases; null where a release has no grade under the code. */
export interface DomainGradeChange {
  code: string;
  before: DomainGrade | null;
  after: DomainGrade | null;
}

/**
 * Grade of every domain before and after a release, on the same assays: metres, mean, coefficient of
 * variation and contained metal (length times grade).
 *
 * @param before, after Codes of n intervals in both releases, NOT_LOGGED where one has none.
 * @param grades n grades, NaN where missing (left out).
 * @param lengthsM n lengths > 0.
 * @returns By code.
 * @throws {KernelError} `shape`; `not-finite` with { row } at an infinite grade; `bad-parameter` with
 *   { row } at a length that is not > 0.
 */
export function gradeChanges(
  before: Category,
  after: Category,
  grades: Float64Array,
  lengthsM: Float64Array,
): DomainGradeChange[] {
  const n = grades.length;
  checkCategory(before, n, 'old domain');
  checkCategory(after, n, 'new domain');
  if (lengthsM.length !== n)
    throw new KernelError('shape', `expected ${n} lengths, found ${lengthsM.length}`);
  for (let row = 0; row < n; row++) {
    if (Math.abs(grades[row]!) === Infinity)
      throw new KernelError(
        'not-finite',
        `expected finite grades, found ${grades[row]} in row ${row}`,
        { row },
      );
    if (!(lengthsM[row]! > 0 && lengthsM[row]! < Infinity))
      throw new KernelError(
        'bad-parameter',
        `expected a length > 0 m, found ${lengthsM[row]} in row ${row}`,
        { row },
      );
  }
  const old = gradesByCode(before, grades, lengthsM);
  const fresh = gradesByCode(after, grades, lengthsM);
  return [...new Set([...old.keys(), ...fresh.keys()])]
    .sort(compareCodePoints)
    .map((code) => ({ code, before: old.get(code) ?? null, after: fresh.get(code) ?? null }));
}

function gradesByCode(
  { levels, codes }: Category,
  grades: Float64Array,
  lengthsM: Float64Array,
): Map<string, DomainGrade> {
  const rows = levels.map((): number[] => []);
  codes.forEach((code, row) => {
    if (code !== NOT_LOGGED && !Number.isNaN(grades[row])) rows[code]!.push(row);
  });
  return new Map(
    levels.flatMap((level, code): [string, DomainGrade][] => {
      const own = rows[code]!;
      if (own.length === 0) return [];
      const weights = Float64Array.from(own, (row) => lengthsM[row]!);
      const { mean, variance } = weightedMoments(
        Float64Array.from(own, (row) => grades[row]!),
        weights,
      );
      const metres = weights.reduce((sum, weight) => sum + weight, 0);
      const cv = variance === null || mean === 0 ? null : Math.sqrt(variance) / mean;
      return [[level, { intervals: own.length, metres, mean, cv, metal: mean * metres }]];
    }),
  );
}
