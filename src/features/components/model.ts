import type { ComponentRun } from '#contract/components.ts';
import { formatShare } from '#src/lib/format.ts';
import { asOpening, inWords } from '#src/lib/number-words.ts';

/** What the components say, from the run's own numbers. */
export function componentsFinding({ suggested, shares, readings }: Pick<ComponentRun, 'suggested' | 'shares' | 'readings'>): string {
  const carried = shares.slice(0, suggested).reduce((sum, share) => sum + share, 0);
  const first = readings.find(({ component }) => component === 1);
  const carry = suggested === 1 ? 'One component carries' : `${asOpening(inWords(suggested))} components carry`;
  const reads = first === undefined ? '' : ` PC1 sets ${first.sentence}.`;
  return `${carry} ${formatShare(carried)} of the variance.${reads}`;
}

export interface PartLoading {
  element: string;
  value: number;
}

/** More bars than this crowd each other: the weakest are left to the table. */
const MOST_BARS = 24;

/** Loadings on one component, counted from 1; of many parts the strongest. */
export function loadingsOf({ parts, loadings }: Pick<ComponentRun, 'parts' | 'loadings'>, component: number): PartLoading[] {
  return parts
    .map((element, index) => ({ element, value: loadings[index]?.[component - 1] ?? 0 }))
    .sort((a, b) => Math.abs(b.value) - Math.abs(a.value))
    .slice(0, MOST_BARS);
}

/** Half the largest loading of a component: from there on an element counts in its reading. */
export function largeFrom({ loadings }: Pick<ComponentRun, 'loadings'>, component: number): number {
  return 0.5 * loadings.reduce((most, row) => Math.max(most, Math.abs(row[component - 1] ?? 0)), 0);
}

/** Five limits that part the finite values into six classes of equal number. */
export function sixths(values: Float64Array): number[] {
  const sorted = values.filter(Number.isFinite).sort();
  if (sorted.length === 0) return [];
  return [1, 2, 3, 4, 5].map((part) => sorted[Math.floor((part * (sorted.length - 1)) / 6)] ?? NaN);
}
