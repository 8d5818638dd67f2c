import { normalQuantile } from '#kernels/normal.ts';
import { TICK_PX } from './chart-styles.ts';
import type { Tick } from './chart-types.ts';
import { textWidth } from './text-width.ts';
import { MOST_TICKS } from './ticks.ts';

/** Marks of a normal probability axis, %, the most useful first. */
const BY_NEED = [50, 1, 99, 10, 90, 0.1, 99.9, 25, 75, 5, 95, 0.01, 99.99];

export const percentToZ = (percent: number) => normalQuantile(percent / 100);

/** All marks inside a range of normal scores, for the grid. */
export function probabilityGrid([low, high]: readonly [number, number]): number[] {
  return BY_NEED.map(percentToZ).filter((z) => z >= low && z <= high);
}

/** At most seven labelled marks that keep clear of each other; the most useful stay. */
export function probabilityTicks([low, high]: readonly [number, number], lengthPx: number): Tick[] {
  const taken: (Tick & { px: number; half: number })[] = [];
  for (const percent of BY_NEED) {
    const value = percentToZ(percent);
    if (value < low || value > high || taken.length === MOST_TICKS) continue;
    const px = ((value - low) / (high - low)) * lengthPx;
    const half = textWidth(String(percent), TICK_PX) / 2 + 5;
    if (taken.every((tick) => Math.abs(tick.px - px) > tick.half + half)) taken.push({ value, label: String(percent), px, half });
  }
  return taken.sort((a, b) => a.value - b.value).map(({ value, label }) => ({ value, label }));
}

export interface PlottedValue {
  /** Index in the values given. */
  index: number;
  value: number;
  /** Normal score of the share of length below, half of its own included. */
  z: number;
}

/**
 * Plotting positions of a probability plot: values in rising order, each at the share of total weight
 * below it plus half its own.
 *
 * @param belowShare Share of the weight that is censored and lies below every value given.
 */
export function plottingPositions(values: ArrayLike<number>, weights: ArrayLike<number> | undefined, belowShare = 0): PlottedValue[] {
  const kept = Array.from({ length: values.length }, (_value, index) => ({ index, value: values[index] ?? NaN, weight: weights?.[index] ?? 1 }))
    .filter(({ value, weight }) => value > 0 && Number.isFinite(value) && weight > 0)
    .sort((a, b) => a.value - b.value);
  const total = kept.reduce((sum, { weight }) => sum + weight, 0);
  let below = 0;
  return kept.map(({ index, value, weight }) => {
    const share = belowShare + (1 - belowShare) * ((below + weight / 2) / total);
    below += weight;
    return { index, value, z: normalQuantile(share) };
  });
}

/** Keeps the tails whole and thins the body: neighbours closer than `gapPx` on the axis are left out. */
export function thinByPlace<Item>(items: readonly Item[], placePx: (item: Item) => readonly [number, number], gapPx: number): Item[] {
  const kept: Item[] = [];
  let last: readonly [number, number] = [-Infinity, -Infinity];
  for (const item of items) {
    const place = placePx(item);
    if (Math.hypot(place[0] - last[0], place[1] - last[1]) < gapPx) continue;
    kept.push(item);
    last = place;
  }
  return kept;
}
