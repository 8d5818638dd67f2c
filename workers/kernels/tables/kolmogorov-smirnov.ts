import { checkGroups, pairsOf } from './grouped-values.ts';
import { kolmogorovTail } from './special-functions.ts';
import { KernelError } from '#kernels/kernel-error.ts';

/** Largest gap between two groups' distribution functions. */
export interface KolmogorovSmirnov {
  first: number;
  second: number;
  /** 0 alike to 1 apart. */
  d: number;
  /** From the limiting law, without small-sample term; nominal down-hole. */
  nominalP: number;
}

/**
 * Two-sample Kolmogorov-Smirnov test of every pair of groups.
 *
 * @param groups Two or more groups, each with a value; no NaN.
 * @throws {KernelError} `too-few-groups`; `not-finite`.
 * @see Smirnov (1948), Annals of Mathematical Statistics 19, 279-281 (from memory).
 */
export function kolmogorovSmirnovPairs(groups: readonly Float64Array[]): KolmogorovSmirnov[] {
  checkGroups(groups);
  const sorted = groups.map((group) => group.slice().sort());
  // sort puts NaN last
  const gap = sorted.findIndex((group) => Number.isNaN(group[group.length - 1]));
  if (gap >= 0)
    throw new KernelError('not-finite', `expected values, found NaN in group ${gap}`, {
      group: gap,
    });
  return pairsOf(groups.length).map(([first, second]) => {
    const a = sorted[first]!;
    const b = sorted[second]!;
    const d = largestGap(a, b);
    const effective = (a.length * b.length) / (a.length + b.length);
    return { first, second, d, nominalP: kolmogorovTail(d * Math.sqrt(effective)) };
  });
}

function largestGap(a: Float64Array, b: Float64Array): number {
  let largest = 0;
  for (let i = 0, j = 0; i < a.length && j < b.length;) {
    const value = Math.min(a[i]!, b[j]!);
    while (i < a.length && a[i]! === value) i++;
    while (j < b.length && b[j]! === value) j++;
    largest = Math.max(largest, Math.abs(i / a.length - j / b.length));
  }
  return largest;
}
