import { KernelError } from '#kernels/kernel-error.ts';

/** State of one grade. */
export const GRADE_STATE = { missing: 0, measured: 1, below: 2, above: 3 } as const;

/** One element by one method, interval by interval. */
export interface Determination {
  /** Method or column name, for the record. */
  name: string;
  /** Value, or the limit passed, ppm; ignored where missing. */
  ppm: Float64Array;
  /** One of `GRADE_STATE` per interval. */
  state: Uint8Array;
}

/** One grade per interval out of several determinations. */
export interface ChosenGrades {
  /** NaN where every determination is missing. */
  ppm: Float64Array;
  state: Uint8Array;
  /** Position of the determination taken; -1 where all are missing. */
  source: Int16Array;
  /** Intervals taken from each determination, in their order. */
  taken: number[];
  /** Intervals over the range of every determination that has them. */
  overRange: number;
}

/**
 * Chooses one grade per interval: the first determination in the order given that measured it or found
 * it below its limit. One that is over range gives way to a later one; where all are over range, the
 * one with the highest limit stays, as a lower bound. No grade is changed or averaged.
 *
 * @param determinations In order of preference, n intervals each.
 * @throws {KernelError} `too-few-rows` without determinations; `shape`; `bad-parameter` with { row } at
 *   a grade or state that is none.
 * @see Common practice: the over-range method replaces the routine one where that is capped.
 */
export function chooseDetermination(determinations: readonly Determination[]): ChosenGrades {
  const n = determinations[0]?.ppm.length;
  if (n === undefined) {
    throw new KernelError('too-few-rows', 'expected at least one determination, found none');
  }
  for (const determination of determinations) checkDetermination(determination, n);
  const out: ChosenGrades = {
    ppm: new Float64Array(n).fill(NaN),
    state: new Uint8Array(n),
    source: new Int16Array(n).fill(-1),
    taken: determinations.map(() => 0),
    overRange: 0,
  };
  for (let row = 0; row < n; row++) {
    const source = chosenFor(determinations, row);
    if (source < 0) continue;
    const { ppm, state } = determinations[source]!;
    out.ppm[row] = ppm[row]!;
    out.state[row] = state[row]!;
    out.source[row] = source;
    out.taken[source]!++;
    if (state[row] === GRADE_STATE.above) out.overRange++;
  }
  return out;
}

function chosenFor(determinations: readonly Determination[], row: number): number {
  let over = -1;
  for (const [i, { ppm, state }] of determinations.entries()) {
    const found = state[row]!;
    if (found === GRADE_STATE.measured || found === GRADE_STATE.below) return i;
    if (found !== GRADE_STATE.above) continue;
    if (over < 0 || ppm[row]! > determinations[over]!.ppm[row]!) over = i;
  }
  return over;
}

function checkDetermination({ name, ppm, state }: Determination, n: number): void {
  if (ppm.length !== n || state.length !== n) {
    const found = `${ppm.length} and ${state.length} of ${name}`;
    throw new KernelError('shape', `expected ${n} grades and states, found ${found}`);
  }
  for (let row = 0; row < n; row++) {
    const isState = state[row]! <= GRADE_STATE.above;
    const isGrade = state[row] === GRADE_STATE.missing || (ppm[row]! >= 0 && ppm[row]! < Infinity);
    if (isState && isGrade) continue;
    const message = `expected ppm >= 0 and a state of ${name}, found ${ppm[row]}, ${state[row]} in row ${row}`;
    throw new KernelError('bad-parameter', message, { row });
  }
}
