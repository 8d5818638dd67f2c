import { KernelError } from '#kernels/kernel-error.ts';

/** What a value stands for; any other code counts as missing. */
export const CENSORING = { measured: 0, below: 1, above: 2 } as const;

/** Rows of one variable sorted by what is known of them. */
export interface ScreenRows {
  /** Grades measured, or at the upper limit, > 0. */
  measured: Float64Array;
  /** Limits of rows below detection. */
  below: Float64Array;
  /** Weights of measured rows, then of those below; null when unweighted. */
  weights: Float64Array | null;
  nBelow: number;
  nAbove: number;
  nMissing: number;
}

/** Share of rows above an upper limit beyond which a distribution is not judged. */
export const MAX_ABOVE_SHARE = 0.01;

/**
 * Sorts rows for a population screen. A row above its upper limit counts at the limit while such rows
 * are at most 1 % of all; NaN and any other censoring code count as missing.
 *
 * @param values Grades, or limits of censored rows; > 0 where known.
 * @param weights Interval lengths (m), >= 0, or null; rows of weight 0 count as missing.
 * @param censoring Code of each row (`CENSORING`), or null when all are measured.
 * @throws {KernelError} `shape`; `not-positive` with { row }; `not-finite`; `bad-parameter` for a
 *   weight < 0 or NaN; `right-censored` beyond 1 % above the limit.
 */
export function screenRows(
  values: Float64Array,
  weights: Float64Array | null,
  censoring: Uint8Array | null,
): ScreenRows {
  const n = values.length;
  if ((weights && weights.length !== n) || (censoring && censoring.length !== n)) {
    throw new KernelError(
      'shape',
      `${n} values, ${weights?.length ?? n} weights, ${censoring?.length ?? n} censoring codes`,
    );
  }
  const [measured, below, measuredWeight, belowWeight]: [number[], number[], number[], number[]] = [
    [],
    [],
    [],
    [],
  ];
  let nAbove = 0;
  for (let row = 0; row < n; row++) {
    const code = censoring ? censoring[row]! : CENSORING.measured;
    const weight = weights ? checkedWeight(weights[row]!, row) : 1;
    const value = values[row]!;
    if (weight === 0 || code > CENSORING.above || Number.isNaN(value)) continue;
    if (!(value > 0))
      throw new KernelError(
        'not-positive',
        `expected a grade > 0, found ${value} at row ${row}: give values below detection their limit`,
        { row },
      );
    if (value === Infinity)
      throw new KernelError('not-finite', `expected a finite grade, found ${value} at row ${row}`, {
        row,
      });
    if (code === CENSORING.above) nAbove += 1;
    (code === CENSORING.below ? below : measured).push(value);
    (code === CENSORING.below ? belowWeight : measuredWeight).push(weight);
  }
  const used = measured.length + below.length;
  if (nAbove > MAX_ABOVE_SHARE * used) {
    throw new KernelError(
      'right-censored',
      `${nAbove} of ${used} rows are above the upper limit, more than ${100 * MAX_ABOVE_SHARE} %: a mixture cannot be fitted`,
      { nAbove, n: used },
    );
  }
  return {
    measured: Float64Array.from(measured),
    below: Float64Array.from(below),
    weights: weights && Float64Array.from([...measuredWeight, ...belowWeight]),
    nBelow: below.length,
    nAbove,
    nMissing: n - used,
  };
}

function checkedWeight(weight: number, row: number): number {
  if (!(weight >= 0 && weight < Infinity))
    throw new KernelError(
      'bad-parameter',
      `expected a weight >= 0, found ${weight} at row ${row}`,
      { row },
    );
  return weight;
}
