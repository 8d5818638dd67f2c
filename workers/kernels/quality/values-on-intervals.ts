import { overlapM } from '#kernels/intervals/interval-table.ts';
import { KernelError } from '#kernels/kernel-error.ts';

/** Intervals down one hole, m, by rising depth, without overlaps. */
export interface HoleIntervals {
  from: Float64Array;
  to: Float64Array;
}

/**
 * Brings a value logged on one set of intervals (recovery by run) to another (samples) of the same
 * hole, weighted by the length they share.
 *
 * @param values One per source interval, NaN where missing. Not modified.
 * @returns Per target interval the weighted value, NaN where no known value overlaps, and the share
 *   of its length that is covered by known values.
 * @throws {KernelError} `shape`; `not-finite` with { row } at a depth or an infinite value; `bad-parameter` with { row }
 *   where an interval has no length or overlaps the one before.
 */
export function valuesOnIntervals(
  source: HoleIntervals,
  values: Float64Array,
  target: HoleIntervals,
): { values: Float64Array; covered: Float64Array } {
  requireIntervals(source, 'source');
  requireIntervals(target, 'target');
  if (values.length !== source.from.length) {
    const message = `expected ${source.from.length} values, found ${values.length}`;
    throw new KernelError('shape', message);
  }
  const endless = values.findIndex((value) => Math.abs(value) === Infinity);
  if (endless >= 0) {
    const message = `expected values or NaN, found ${values[endless]} at source interval ${endless}`;
    throw new KernelError('not-finite', message, { row: endless });
  }
  const n = target.from.length;
  const out = { values: new Float64Array(n), covered: new Float64Array(n) };
  let first = 0;
  for (let row = 0; row < n; row++) {
    const [top, bottom] = [target.from[row]!, target.to[row]!];
    while (first < values.length && source.to[first]! <= top) first++;
    let [sum, length] = [0, 0];
    for (let i = first; i < values.length && source.from[i]! < bottom; i++) {
      if (Number.isNaN(values[i])) continue;
      const shared = overlapM(top, bottom, source.from[i]!, source.to[i]!);
      sum += shared * values[i]!;
      length += shared;
    }
    out.values[row] = length > 0 ? sum / length : NaN;
    out.covered[row] = length / (bottom - top);
  }
  return out;
}

function requireIntervals({ from, to }: HoleIntervals, which: string): void {
  if (from.length !== to.length) {
    const message = `expected as many ends as starts of ${which} intervals, found ${to.length} and ${from.length}`;
    throw new KernelError('shape', message);
  }
  for (let row = 0; row < from.length; row++) {
    const [top, bottom] = [from[row]!, to[row]!];
    if (!Number.isFinite(top) || !Number.isFinite(bottom)) {
      throw new KernelError('not-finite', `${which} interval ${row}: expected depths`, { row });
    }
    if (!(bottom > top) || (row > 0 && top < to[row - 1]!)) {
      const message = `${which} interval ${row}: expected depths that rise without overlap, found ${top} to ${bottom} m`;
      throw new KernelError('bad-parameter', message, { row });
    }
  }
}
