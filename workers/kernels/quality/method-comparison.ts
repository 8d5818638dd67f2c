import { KernelError } from '#kernels/kernel-error.ts';
import { passingBablok, type PassingBablok } from './passing-bablok.ts';
import { reducedMajorAxis, type ReducedMajorAxis } from './reduced-major-axis.ts';

/** What two methods of one element may be used for together. */
export type MethodVerdict = 'comparable' | 'convertible' | 'not-comparable';

/** A line that brings results of one method to the level of another, within its range. */
export interface Conversion {
  slope: number;
  intercept: number;
  /** Range of the older method it was drawn through. */
  from: number;
  to: number;
}

export interface MethodComparison {
  verdict: MethodVerdict;
  /** 100 (mean of the reference / mean of the other - 1), %. */
  biasPercent: number;
  /** Set when convertible; converted rows must be marked. */
  conversion: Conversion | null;
  passingBablok: PassingBablok;
  majorAxis: ReducedMajorAxis;
  sentence: string;
}

/** Largest bias, %, of comparable methods, and least correlation of convertible ones. */
export const METHOD_LIMITS = { biasPercent: 5, correlation: 0.95 } as const;

/**
 * Compares one element by two methods on the same samples. Comparable: bias within 5 % and a
 * Passing-Bablok slope whose range holds 1. Convertible: linear with r of .95 or more. Otherwise the
 * older set stays out of a grouping by that element.
 *
 * @param other, reference The same samples, one unit, finite, > 0 on average; at least five: leave
 *   values below detection out before. Not modified.
 * @throws {KernelError} `shape`, `too-few-rows`, `not-finite`; `singular` when a side does not vary,
 *   the methods do not rise together, or the mean of `other` is not > 0.
 */
export function compareMethods(
  other: Float64Array,
  reference: Float64Array,
  options: { seed: number },
): MethodComparison {
  const majorAxis = reducedMajorAxis(other, reference);
  const robust = passingBablok(other, reference, options);
  const meanOf = (values: Float64Array) => values.reduce((a, b) => a + b, 0) / values.length;
  if (!(meanOf(other) > 0)) {
    throw new KernelError('singular', `expected a mean > 0, found ${meanOf(other)}`);
  }
  const biasPercent = 100 * (meanOf(reference) / meanOf(other) - 1);
  const { low, high } = robust.slopeInterval;
  const isComparable =
    Math.abs(biasPercent) <= METHOD_LIMITS.biasPercent && low <= 1 + 1e-12 && high >= 1 - 1e-12;
  const isLinear = majorAxis.r >= METHOD_LIMITS.correlation;
  const verdict = isComparable ? 'comparable' : isLinear ? 'convertible' : 'not-comparable';
  return {
    verdict,
    biasPercent,
    conversion: verdict === 'convertible' ? conversionOf(other, robust) : null,
    passingBablok: robust,
    majorAxis,
    sentence: sentenceOf(verdict, biasPercent, robust, majorAxis.r),
  };
}

function conversionOf(other: Float64Array, { slope, intercept }: PassingBablok): Conversion {
  const from = other.reduce((a, b) => Math.min(a, b), Infinity);
  const to = other.reduce((a, b) => Math.max(a, b), -Infinity);
  return { slope, intercept, from, to };
}

function sentenceOf(
  verdict: MethodVerdict,
  biasPercent: number,
  { slopeInterval }: PassingBablok,
  r: number,
): string {
  const { low, high } = slopeInterval;
  const found = `bias ${biasPercent.toFixed(1)} %, slope ${low.toFixed(2)} to ${high.toFixed(2)}, r ${r.toFixed(3)}`;
  const reading = {
    comparable: 'Comparable',
    convertible: 'Comparable after conversion',
    'not-comparable': 'Not comparable: leave the older set out of groups by this element',
  }[verdict];
  return `${reading}: ${found}.`;
}
