import { KernelError } from '#kernels/kernel-error.ts';
import { oxideFactor } from './oxides.ts';

/** Iron columns of one file, each in one mass unit; null where a file lacks them. */
export interface IronForms {
  /** FeO column: ferrous iron, or all iron reported as FeO. */
  feo: Float64Array | null;
  /** Fe2O3 column: ferric iron, or all iron reported as Fe2O3. */
  fe2o3: Float64Array | null;
}

/**
 * What the two columns mean: `separate` determinations of ferrous and ferric iron are added;
 * `total` says that Fe2O3 (else FeO) reports all iron and the other column is part of it.
 */
export type IronMeaning = 'separate' | 'total';

/**
 * Iron from FeO and Fe2O3 columns, as the person who knows the file says what they mean: adding two
 * reports of the same iron would double it.
 *
 * @param forms n grades each, NaN where not assayed.
 * @returns n grades of Fe in the same unit; NaN where a column that is needed is not assayed.
 * @throws {KernelError} `too-few-parts` without a column; `shape`; `bad-parameter` with { row } at a
 *   negative or infinite grade.
 */
export function ironOf({ feo, fe2o3 }: IronForms, meaning: IronMeaning): Float64Array {
  const columns = [
    { grades: fe2o3, factor: oxideFactor('Fe2O3'), name: 'Fe2O3' },
    { grades: feo, factor: oxideFactor('FeO'), name: 'FeO' },
  ].flatMap(({ grades, ...column }) => (grades === null ? [] : [{ grades, ...column }]));
  const [first] = columns;
  if (!first) throw new KernelError('too-few-parts', 'expected FeO or Fe2O3, found neither');
  const n = first.grades.length;
  for (const { grades, name } of columns) {
    if (grades.length !== n) {
      throw new KernelError('shape', `expected ${n} grades of ${name}, found ${grades.length}`);
    }
    grades.forEach((grade, row) => {
      if (Number.isNaN(grade) || (grade >= 0 && grade < Infinity)) return;
      const message = `expected a grade >= 0 of ${name}, found ${grade} in row ${row}`;
      throw new KernelError('bad-parameter', message, { row });
    });
  }
  const used = meaning === 'total' ? [first] : columns;
  return Float64Array.from({ length: n }, (_, row) =>
    used.reduce((sum, { grades, factor }) => sum + grades[row]! / factor, 0),
  );
}
