import { tickFormat, ticks as evenSteps } from 'd3';
import { TICK_PX } from './chart-styles.ts';
import type { ScaleKind, Tick } from './chart-types.ts';
import { textWidth } from './text-width.ts';

export const MOST_TICKS = 7;
const LEAST_GAP_PX = 10;
const LEAST_PITCH_PX = 20;

const significant = new Intl.NumberFormat('en-GB', { maximumSignificantDigits: 2 });

/** A number as an axis shows it: true minus, thousands parted. */
export function tickLabel(value: number): string {
  return significant.format(value).replace('-', '\u2212');
}

/** A grid coordinate: whole metres, not parted, as drawn on a plan. */
export function coordinateLabel(value: number): string {
  return Math.round(value).toFixed(0).replace('-', '\u2212');
}

export interface TickRoom {
  lengthPx: number;
  vertical?: boolean;
  most?: number;
  label?: (value: number) => string;
}

/** Do the labels keep clear of each other, laid at these places along the axis? */
function fits(found: Tick[], placePx: (value: number) => number, vertical: boolean): boolean {
  for (let i = 1; i < found.length; i++) {
    const [one, two] = [found[i - 1], found[i]];
    if (one === undefined || two === undefined) return false;
    const apart = Math.abs(placePx(two.value) - placePx(one.value));
    const widths = (textWidth(one.label, TICK_PX) + textWidth(two.label, TICK_PX)) / 2;
    if (apart < (vertical ? LEAST_PITCH_PX : widths + LEAST_GAP_PX)) return false;
  }
  return true;
}

/** Even ticks inside a domain: as many as keep clear of each other, at most seven. */
export function linearTicks(domain: readonly [number, number], room: TickRoom): Tick[] {
  const [low, high] = domain;
  const most = room.most ?? MOST_TICKS;
  const placePx = (value: number) => ((value - low) / (high - low)) * room.lengthPx;
  for (let count = most; count >= 1; count--) {
    const values = evenSteps(low, high, count);
    const format = room.label ?? tickFormat(low, high, count, ',f');
    const found = values.map((value) => ({ value, label: format(value) }));
    if (found.length <= most && fits(found, placePx, room.vertical === true)) return found;
  }
  return [];
}

function logValues(domain: readonly [number, number], steps: readonly number[], everyDecade: number): number[] {
  const [low, high] = domain;
  const values: number[] = [];
  for (let decade = Math.floor(Math.log10(low)); decade <= Math.ceil(Math.log10(high)); decade++) {
    if (decade % everyDecade !== 0) continue;
    for (const step of steps) {
      const value = step * 10 ** decade;
      if (value >= low * 0.999999 && value <= high * 1.000001) values.push(Number(value.toPrecision(2)));
    }
  }
  return values;
}

/** Ticks of a log axis: 1-2-5, else 1-3, else decades, the densest that stays legible. */
export function logTicks(domain: readonly [number, number], room: TickRoom): Tick[] {
  const [low, high] = domain;
  if (!(low > 0) || !(high > low)) return [];
  const most = room.most ?? MOST_TICKS;
  const placePx = (value: number) => (Math.log(value / low) / Math.log(high / low)) * room.lengthPx;
  const label = room.label ?? tickLabel;
  const ladders: [number[], number][] = [[[1, 2, 5], 1], [[1, 3], 1], [[1], 1], [[1], 2], [[1], 3], [[1], 4]];
  for (const [steps, everyDecade] of ladders) {
    const found = logValues(domain, steps, everyDecade).map((value) => ({ value, label: label(value) }));
    if (found.length < 2) break;
    if (found.length <= most && fits(found, placePx, room.vertical === true)) return found;
  }
  return linearTicks(domain, { ...room, most: 4 });
}

export function axisTicks(kind: ScaleKind, domain: readonly [number, number], room: TickRoom): Tick[] {
  return kind === 'log' ? logTicks(domain, room) : linearTicks(domain, room);
}

/** Least and greatest finite value (above zero on a log axis), widened a little so marks clear the axis. */
export function niceDomain(values: Iterable<number>, kind: ScaleKind, marginShare = 0.04): [number, number] {
  let low = Infinity;
  let high = -Infinity;
  for (const value of values) {
    if (!Number.isFinite(value) || (kind === 'log' && value <= 0)) continue;
    if (value < low) low = value;
    if (value > high) high = value;
  }
  if (low > high) return kind === 'log' ? [0.1, 10] : [0, 1];
  if (kind === 'log') {
    const margin = (high / low) ** marginShare;
    return low === high ? [low / 3, high * 3] : [low / margin, high * margin];
  }
  if (low === high) return [low - (Math.abs(low) || 1) / 2, high + (Math.abs(high) || 1) / 2];
  const margin = (high - low) * marginShare;
  return [low - margin, high + margin];
}
