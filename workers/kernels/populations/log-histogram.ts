import type { MixtureData } from './mixture-data.ts';

/** Histogram on the ln scale. */
export interface LogHistogram {
  /** Bin edges in ln grade, ascending, one more than counts. */
  edges: Float64Array;
  /** Weight in each bin (effective rows). */
  counts: Float64Array;
}

const MAX_BINS = 80;

/**
 * Histogram of ln grade with bins of width 2 IQR / n^(1/3), at least 5 and at most 80 of them; ties
 * with no interquartile range fall back on the range in 10 bins. Values below detection are not in it.
 *
 * @see Freedman & Diaconis (1981), Z. Wahrsch. verw. Gebiete 57 (from memory).
 */
export function logHistogram(data: MixtureData): LogHistogram {
  const { y, weight } = data;
  const low = y[0]!;
  const high = y[y.length - 1]!;
  if (low === high)
    return { edges: Float64Array.of(low - 0.5, low + 0.5), counts: Float64Array.of(weight[0]!) };
  const width = (2 * (valueAt(data, 0.75) - valueAt(data, 0.25))) / Math.cbrt(data.n);
  const bins = width > 0 ? Math.min(MAX_BINS, Math.max(5, Math.ceil((high - low) / width))) : 10;
  const counts = new Float64Array(bins);
  for (let i = 0; i < y.length; i++) {
    counts[Math.min(bins - 1, Math.floor(((y[i]! - low) / (high - low)) * bins))]! += weight[i]!;
  }
  return {
    edges: Float64Array.from({ length: bins + 1 }, (_, i) => low + ((high - low) * i) / bins),
    counts,
  };
}

/** The value at which the running weight first reaches a share of the whole. */
function valueAt({ y, weight }: MixtureData, share: number): number {
  const target = share * weight.reduce((sum, w) => sum + w, 0);
  let running = 0;
  let i = 0;
  while (i < y.length - 1 && (running += weight[i]!) < target) i += 1;
  return y[i]!;
}
