import { KernelError } from '#kernels/kernel-error.ts';

function ascending(p: Float64Array): number[] {
  p.forEach((value, test) => {
    if (!(value >= 0 && value <= 1)) {
      throw new KernelError(
        'bad-parameter',
        `expected p in [0, 1], found ${value} at test ${test}`,
        { test },
      );
    }
  });
  return Array.from(p.keys()).sort((a, b) => p[a]! - p[b]! || a - b);
}

/**
 * Benjamini-Hochberg adjusted p: reject where it is <= the accepted share of false discoveries.
 *
 * @param p One p per test, in [0, 1].
 * @returns Adjusted p in the same order, each >= its p and <= 1.
 * @throws {KernelError} `bad-parameter` with { test }.
 * @see Benjamini & Hochberg (1995), Journal of the Royal Statistical Society B 57, 289-300.
 */
export function benjaminiHochberg(p: Float64Array): Float64Array {
  const order = ascending(p);
  const adjusted = new Float64Array(p.length);
  let least = 1;
  for (let rank = p.length; rank >= 1; rank--) {
    const test = order[rank - 1]!;
    least = Math.min(least, p[test]! * (p.length / rank));
    adjusted[test] = least;
  }
  return adjusted;
}

/**
 * Holm adjusted p: reject where it is <= the accepted chance of any false rejection.
 *
 * @param p One p per test, in [0, 1].
 * @throws {KernelError} `bad-parameter` with { test }.
 * @see Holm (1979), Scandinavian Journal of Statistics 6, 65-70.
 */
export function holm(p: Float64Array): Float64Array {
  const order = ascending(p);
  const adjusted = new Float64Array(p.length);
  let greatest = 0;
  order.forEach((test, i) => {
    greatest = Math.max(greatest, Math.min(1, p[test]! * (p.length - i)));
    adjusted[test] = greatest;
  });
  return adjusted;
}
