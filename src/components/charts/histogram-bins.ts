import type { ScaleKind } from './chart-types.ts';

export interface Bin {
  from: number;
  to: number;
  /** Share of the total weight. */
  share: number;
}

const forward = (value: number, kind: ScaleKind) => (kind === 'log' ? Math.log(value) : value);
const back = (t: number, kind: ScaleKind) => (kind === 'log' ? Math.exp(t) : t);

function quartile(sorted: readonly number[], share: number): number {
  return sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))] ?? NaN;
}

/** Number of bins by the rule of Freedman and Diaconis (1981), between 8 and 60. */
export function binCount(sorted: readonly number[]): number {
  const [low = 0] = sorted;
  const high = sorted.at(-1) ?? 0;
  const width = (2 * (quartile(sorted, 0.75) - quartile(sorted, 0.25))) / Math.cbrt(sorted.length);
  const count = width > 0 ? Math.ceil((high - low) / width) : 8;
  return Math.min(60, Math.max(8, count));
}

/** Bins of equal width in the value, or in its log, with their share of the weight. */
export function histogramBins(values: ArrayLike<number>, weights: ArrayLike<number> | undefined, kind: ScaleKind, wanted?: number): Bin[] {
  const kept: { t: number; weight: number }[] = [];
  for (let i = 0; i < values.length; i++) {
    const t = forward(values[i] ?? NaN, kind);
    const weight = weights?.[i] ?? 1;
    if (Number.isFinite(t) && weight > 0) kept.push({ t, weight });
  }
  kept.sort((a, b) => a.t - b.t);
  const low = kept[0]?.t;
  const high = kept.at(-1)?.t;
  if (low === undefined || high === undefined) return [];
  const count = high > low ? (wanted ?? binCount(kept.map(({ t }) => t))) : 1;
  const width = high > low ? (high - low) / count : 1;
  const start = high > low ? low : low - 0.5;
  const shares = new Float64Array(count);
  const total = kept.reduce((sum, { weight }) => sum + weight, 0);
  for (const { t, weight } of kept) {
    const bin = Math.min(count - 1, Math.floor((t - start) / width));
    shares[bin] = (shares[bin] ?? 0) + weight / total;
  }
  return Array.from(shares, (share, i) => ({ from: back(start + i * width, kind), to: back(start + (i + 1) * width, kind), share }));
}
