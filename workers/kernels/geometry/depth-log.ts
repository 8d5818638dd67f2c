import { orderWithoutOverlap, type IntervalTable } from '#kernels/intervals/interval-table.ts';
import { LOGGING_TOLERANCE_M } from '#kernels/intervals/interval-table.ts';
import { KernelError } from '#kernels/kernel-error.ts';

/** Depths of a regular curve down one hole. */
export interface DepthSteps {
  /** Depth of the first sample (m), >= 0. */
  startM: number;
  /** Distance between samples down the hole (m), > 0. */
  stepM: number;
  /** Number of samples, >= 1. */
  count: number;
}

const MOST_SAMPLES = 10_000_000;

/**
 * Steps that cover a hole: samples at the middles of `stepM` pieces from `topM` to its end.
 *
 * @throws {KernelError} `bad-parameter` at depths or a step that are none, or over 10 million samples.
 */
export function depthSteps(topM: number, endM: number, stepM: number): DepthSteps {
  if (!(topM >= 0 && endM > topM && endM < Infinity)) {
    throw new KernelError('bad-parameter', `expected 0 <= top < end, found ${topM} to ${endM} m`);
  }
  if (!(stepM > 0)) throw new KernelError('bad-parameter', `expected a step > 0 m, found ${stepM}`);
  const steps = { startM: topM + stepM / 2, stepM, count: Math.ceil((endM - topM) / stepM - 1e-9) };
  checkSteps(steps);
  return steps;
}

/** Depth of each sample (m). */
export function depthsOf({ startM, stepM, count }: DepthSteps): Float64Array {
  return Float64Array.from({ length: count }, (_, i) => startM + i * stepM);
}

/**
 * A logged category as a depth curve: the interval with from <= depth < to. Depth is measured down
 * the hole, never vertically.
 *
 * @param intervals Intervals of one hole in any order, without overlaps.
 * @param codes Code of each interval.
 * @returns One code per sample; `missing` where no interval lies.
 * @throws {KernelError} `shape`, `bad-interval`, `overlap`; `bad-parameter` at the steps.
 */
export function categoryCurve(
  intervals: IntervalTable,
  codes: Int32Array,
  steps: DepthSteps,
  missing = -1,
): Int32Array {
  checkSteps(steps);
  const order = orderedRows(intervals, codes.length);
  const curve = new Int32Array(steps.count).fill(missing);
  let at = 0;
  for (let i = 0; i < steps.count; i++) {
    const depth = steps.startM + i * steps.stepM;
    while (at < order.length && intervals.toM[order[at]!]! <= depth) at++;
    const row = order[at];
    if (row !== undefined && intervals.fromM[row]! <= depth) curve[i] = codes[row]!;
  }
  return curve;
}

/**
 * Grades as a depth curve: the length-weighted mean over half a step above and below each depth. Sum
 * of grade x step gives the metal back within one step at each end of a covered stretch.
 *
 * @param intervals Intervals of one hole in any order, without overlaps.
 * @param values One per interval; NaN where not assayed.
 * @returns One value per sample; NaN where less than half of its step is assayed.
 * @throws {KernelError} `shape`, `bad-interval`, `overlap`; `bad-parameter` at the steps;
 *   `not-finite` with { row } at an infinite value.
 */
export function gradeCurve(
  intervals: IntervalTable,
  values: Float64Array,
  steps: DepthSteps,
): Float64Array {
  checkSteps(steps);
  const order = orderedRows(intervals, values.length);
  const endless = values.findIndex((value) => Math.abs(value) === Infinity);
  if (endless >= 0) {
    const message = `expected grades or NaN, found ${values[endless]} in row ${endless}`;
    throw new KernelError('not-finite', message, { row: endless });
  }
  const { fromM, toM } = intervals;
  const curve = new Float64Array(steps.count).fill(NaN);
  let first = 0;
  for (let i = 0; i < steps.count; i++) {
    const top = steps.startM + (i - 0.5) * steps.stepM;
    const bottom = top + steps.stepM;
    while (first < order.length && toM[order[first]!]! <= top) first++;
    let [covered, sum] = [0, 0];
    for (let at = first; at < order.length && fromM[order[at]!]! < bottom; at++) {
      const row = order[at]!;
      if (Number.isNaN(values[row]!)) continue;
      const shared = Math.min(bottom, toM[row]!) - Math.max(top, fromM[row]!);
      covered += shared;
      sum += shared * values[row]!;
    }
    if (covered > 0 && covered >= (steps.stepM / 2) * (1 - 1e-9)) curve[i] = sum / covered;
  }
  return curve;
}

function checkSteps({ startM, stepM, count }: DepthSteps): void {
  const isFine = startM >= 0 && startM < Infinity && stepM > 0 && stepM < Infinity;
  if (isFine && Number.isInteger(count) && count >= 1 && count <= MOST_SAMPLES) return;
  const message = `expected a start >= 0 m, a step > 0 m and 1 to ${MOST_SAMPLES} samples, found ${startM}, ${stepM}, ${count}`;
  throw new KernelError('bad-parameter', message);
}

function orderedRows(intervals: IntervalTable, count: number): Uint32Array {
  if (intervals.fromM.length === count) return orderWithoutOverlap(intervals, LOGGING_TOLERANCE_M);
  throw new KernelError(
    'shape',
    `expected ${intervals.fromM.length} values, one per interval, found ${count}`,
  );
}
