import { sortedAscending } from '#kernels/statistics/sort-ascending.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { requireFinite } from '#kernels/statistics/require-finite.ts';

/** A step from one grade to the next above it, both in the upper tail. */
export interface TailStep {
  /** Rows at or below the lower grade. */
  rank: number;
  below: number;
  above: number;
  /** (above - below) / below. */
  relative: number;
}

/** How the upper tail of sorted grades falls apart. */
export interface Disintegration {
  /** Every step of the tail, ascending. */
  steps: TailStep[];
  /** The largest relative step; null when the tail holds no rise. */
  largest: TailStep | null;
  /** The lowest step larger than the limit: where the tail begins to fall apart; null when none is. */
  firstBreak: TailStep | null;
}

/** Share of the rows that is looked at as tail, and the relative step that counts as a break. */
export const DISINTEGRATION_RULES = { tailShare: 0.1, step: 0.15 } as const;

/**
 * Steps between neighbouring grades in the upper tail. A break of 10 to 15 % and more tells grades that
 * stand alone from the body of the distribution (common practice, from memory); it proposes a cap to be
 * looked at, not one to be applied.
 *
 * @param values Grades > 0. Not modified.
 * @param rules Share of rows taken as tail (at least two rows are) and the limit of a step.
 * @throws {KernelError} `too-few-rows` under 10 grades; `not-finite`; `not-positive` with { row };
 *   `bad-parameter`.
 */
export function disintegration(
  values: ArrayLike<number>,
  rules: { tailShare: number; step: number } = DISINTEGRATION_RULES,
): Disintegration {
  requireFinite(values, 'grades');
  if (!(rules.tailShare > 0 && rules.tailShare <= 1 && rules.step > 0))
    throw new KernelError(
      'bad-parameter',
      `expected a tail share in (0, 1] and a step > 0, found ${rules.tailShare}, ${rules.step}`,
    );
  const n = values.length;
  if (n < 10) throw new KernelError('too-few-rows', `a tail needs 10 grades, found ${n}`, { n });
  const row = Array.from(values).findIndex((value) => !(value > 0));
  if (row >= 0)
    throw new KernelError(
      'not-positive',
      `expected a grade > 0, found ${values[row]} at row ${row}`,
      { row },
    );
  const sorted = sortedAscending(values);
  const first = Math.min(n - 2, Math.floor((1 - rules.tailShare) * n));
  const steps: TailStep[] = [];
  for (let i = first; i + 1 < n; i++) {
    const [below, above] = [sorted[i]!, sorted[i + 1]!];
    if (above > below) steps.push({ rank: i + 1, below, above, relative: (above - below) / below });
  }
  return {
    steps,
    largest: steps.reduce<TailStep | null>(
      (most, step) => (most && most.relative >= step.relative ? most : step),
      null,
    ),
    firstBreak: steps.find((step) => step.relative > rules.step) ?? null,
  };
}
