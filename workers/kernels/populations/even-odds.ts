import type { NormalComponent } from './mixture-em.ts';

/**
 * The point between two component means where both are equally likely, share times density equal:
 * a value above it belongs to the upper population by better than even odds.
 *
 * @param a, b Two components (ln grade) in either order.
 * @returns The point in the unit of the means (ln grade), or null when one component outweighs the
 *   other all the way between the means.
 */
export function evenOddsPoint(a: NormalComponent, b: NormalComponent): number | null {
  const [low, high] = a.mean <= b.mean ? [a, b] : [b, a];
  // ln(share density) of low less that of high: quadratic in the distance from the lower mean
  const gap = high.mean - low.mean;
  const lowPrecision = 1 / (2 * low.sd ** 2);
  const highPrecision = 1 / (2 * high.sd ** 2);
  const square = highPrecision - lowPrecision;
  const linear = -2 * highPrecision * gap;
  const constant =
    highPrecision * gap ** 2 + Math.log((low.share / low.sd) * (high.sd / high.share));
  const root = rootsOf(square, linear, constant).find((x) => x >= 0 && x <= gap);
  return root === undefined || gap === 0 ? null : low.mean + root;
}

/** Real roots of a x² + b x + c, ascending; stable when a is small. */
function rootsOf(a: number, b: number, c: number): number[] {
  const discriminant = b * b - 4 * a * c;
  if (discriminant < 0) return [];
  const q = -0.5 * (b + (b < 0 ? -1 : 1) * Math.sqrt(discriminant));
  const roots = [q === 0 ? NaN : c / q, a === 0 ? NaN : q / a];
  return roots.filter((root) => Number.isFinite(root)).sort((x, y) => x - y);
}
