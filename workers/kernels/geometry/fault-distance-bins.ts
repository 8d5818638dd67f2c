import { KernelError } from '#kernels/kernel-error.ts';

/** What lies in one class of distance to a fault. */
export interface DistanceBin {
  fromM: number;
  /** Infinity in the last bin. */
  toM: number;
  /** Holes with a valued interval here: few holes carry little evidence. */
  holes: number;
  intervals: number;
  metres: number;
  /** Length-weighted mean; null without a valued interval. */
  mean: number | null;
}

/** Distances (m) at which bins end: common practice for decay away from a fault. */
export const DISTANCE_BREAKS_M: readonly number[] = [0, 5, 10, 25, 50, 100];

/**
 * How a grade or a measure of alteration changes with distance from a fault.
 *
 * @param distancesM Signed distance of each interval's middle; NaN leaves it out.
 * @param values One per interval; NaN leaves it out.
 * @param lengthsM Interval lengths, > 0.
 * @param holes Hole number of each interval.
 * @param options.side Both sides by distance, or one only.
 * @returns One per bin, the last without end.
 * @throws {KernelError} `shape`; `bad-parameter` at breaks that do not ascend from 0 or with { row } at
 *   a length that is none.
 */
export function faultDistanceBins(
  distancesM: Float64Array,
  values: Float64Array,
  lengthsM: Float64Array,
  holes: Int32Array,
  options: { breaksM?: readonly number[]; side?: 'both' | 'above' | 'below' } = {},
): DistanceBin[] {
  const { breaksM = DISTANCE_BREAKS_M, side = 'both' } = options;
  const n = distancesM.length;
  if (values.length !== n || lengthsM.length !== n || holes.length !== n) {
    const found = [values.length, lengthsM.length, holes.length].join(', ');
    throw new KernelError('shape', `expected ${n} values, lengths and holes, found ${found}`);
  }
  const ascend = breaksM.every((at, i) => (i === 0 ? at === 0 : at > breaksM[i - 1]!));
  if (breaksM.length === 0 || !ascend) {
    const message = `expected breaks that ascend from 0 m, found ${breaksM.join(', ')}`;
    throw new KernelError('bad-parameter', message);
  }
  const rows: number[][] = breaksM.map(() => []);
  for (let row = 0; row < n; row++) {
    if (!(lengthsM[row]! > 0 && lengthsM[row]! < Infinity)) {
      const message = `expected a length > 0 m, found ${lengthsM[row]} in row ${row}`;
      throw new KernelError('bad-parameter', message, { row });
    }
    const distance = distancesM[row]!;
    const isOnSide = side === 'both' || distance >= 0 === (side === 'above');
    if (Number.isNaN(distance) || !Number.isFinite(values[row]!) || !isOnSide) continue;
    const bin = breaksM.findLastIndex((at) => Math.abs(distance) >= at);
    rows[bin]!.push(row);
  }
  return rows.map((members, bin) => {
    const metres = members.reduce((sum, row) => sum + lengthsM[row]!, 0);
    const metal = members.reduce((sum, row) => sum + lengthsM[row]! * values[row]!, 0);
    return {
      fromM: breaksM[bin]!,
      toM: breaksM[bin + 1] ?? Infinity,
      holes: new Set(members.map((row) => holes[row]!)).size,
      intervals: members.length,
      metres,
      mean: members.length > 0 ? metal / metres : null,
    };
  });
}
