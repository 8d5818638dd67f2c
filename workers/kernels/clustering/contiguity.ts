import { KernelError } from '#kernels/kernel-error.ts';
import { compactLabels, type Labels } from './group-moments.ts';

/** Labels down the holes. */
export interface ContiguityInput {
  /** 1..K per row, 0 = unassigned: left out, and it ends a run. */
  labels: Labels;
  /** Sequence of each row, rows of one sequence together (`downHoleSequences`). */
  sequence: ArrayLike<number>;
  /** Interval lengths, m. */
  lengthM: Float64Array;
}

/** How one class lies down the holes. */
export interface ClassContiguity {
  label: number;
  rows: number;
  metres: number;
  /** Runs: stretches of the class within a sequence. */
  runs: number;
  /** Runs to expect if the labels of each sequence were shuffled. */
  expectedRuns: number;
  /** 1 - runs / expectedRuns: 0 as shuffled, towards 1 in few long runs; null when nothing is expected. */
  kappa: number | null;
  meanRunM: number;
  /** Label to merge with when the class is salt and pepper (mean run under two intervals and kappa < .2). */
  mergeWith: number | null;
}

/** Down-hole contiguity of a labelling. */
export interface Contiguity {
  classes: ClassContiguity[];
  runs: number;
  expectedRuns: number;
  varianceRuns: number;
  /** (runs - expected) / sd, strongly negative for long runs; null when runs cannot vary. */
  z: number | null;
  /** Steps from an interval to the next of the same class, and their expectation when shuffled. */
  joins: number;
  expectedJoins: number;
  /** Row-major, shape (K, K) in the order of `classes`: steps down the hole from class to class. */
  transitions: Float64Array;
  /** Rows used; sequences of a single row are left out. */
  nUsed: number;
}

const MERGE_KAPPA = 0.2;

/**
 * Runs of each class down the holes against the runs that shuffling the labels within each sequence
 * would give, in closed form: E R = (n (n + 1) - Σ n_i²) / n with the variance of Mood (1940); for one
 * class E = n_i (n - n_i + 1) / n; summed over sequences. Assays are autocorrelated whatever the
 * domains are: compare classes by kappa and mean run, never by a p value.
 *
 * @throws {KernelError} `shape`; `bad-parameter` for a label or length out of range.
 * @see Mood (1940), The distribution theory of runs, Ann. Math. Stat. 11 (from memory).
 */
export function contiguity({ labels, sequence, lengthM }: ContiguityInput): Contiguity {
  if (labels.length !== sequence.length || labels.length !== lengthM.length) {
    throw new KernelError(
      'shape',
      `${labels.length} labels, ${sequence.length} sequence numbers, ${lengthM.length} lengths`,
    );
  }
  const { labelOf, groupOf } = compactLabels(labels);
  const tally = emptyTally(labelOf.length);
  for (let start = 0; start < labels.length;) {
    let end = start + 1;
    while (end < labels.length && sequence[end] === sequence[start]) end += 1;
    addStretch(tally, labels, groupOf, lengthM, start, end);
    start = end;
  }
  return summary(tally, labelOf);
}

interface Tally {
  k: number;
  rows: Float64Array;
  metres: Float64Array;
  runs: Float64Array;
  expected: Float64Array;
  transitions: Float64Array;
  expectedRuns: number;
  varianceRuns: number;
  expectedJoins: number;
}

function emptyTally(k: number): Tally {
  const zeros = () => new Float64Array(k);
  return {
    k,
    rows: zeros(),
    metres: zeros(),
    runs: zeros(),
    expected: zeros(),
    transitions: new Float64Array(k * k),
    expectedRuns: 0,
    varianceRuns: 0,
    expectedJoins: 0,
  };
}

/** Adds one sequence, cut at unassigned rows into stretches. */
function addStretch(
  tally: Tally,
  labels: Labels,
  groupOf: Uint16Array,
  lengthM: Float64Array,
  start: number,
  end: number,
): void {
  for (let from = start; from < end;) {
    let to = from;
    while (to < end && labels[to] !== 0) to += 1;
    if (to - from > 1) addLabelled(tally, labels, groupOf, lengthM, from, to);
    from = to + 1;
  }
}

/** Adds rows from..to, all labelled and unbroken, at least two. */
function addLabelled(
  tally: Tally,
  labels: Labels,
  groupOf: Uint16Array,
  lengthM: Float64Array,
  from: number,
  to: number,
): void {
  const { k } = tally;
  const counts = new Float64Array(k);
  for (let row = from, previous = -1; row < to; row++) {
    const group = groupOf[labels[row]!]!;
    if (!(lengthM[row]! > 0 && lengthM[row]! < Infinity))
      throw new KernelError(
        'bad-parameter',
        `expected a length > 0 m, found ${lengthM[row]} in row ${row}`,
        { row },
      );
    counts[group]! += 1;
    tally.metres[group]! += lengthM[row]!;
    if (group !== previous) tally.runs[group]! += 1;
    if (previous >= 0) tally.transitions[previous * k + group]! += 1;
    previous = group;
  }
  const n = to - from;
  let squares = 0;
  let cubes = 0;
  for (let g = 0; g < k; g++) {
    const count = counts[g]!;
    tally.rows[g]! += count;
    tally.expected[g]! += (count * (n - count + 1)) / n;
    tally.expectedJoins += (count * (count - 1)) / n;
    squares += count ** 2;
    cubes += count ** 3;
  }
  tally.expectedRuns += (n * (n + 1) - squares) / n;
  tally.varianceRuns +=
    (squares * (squares + n * (n + 1)) - 2 * n * cubes - n ** 3) / (n * n * (n - 1));
}

function summary(tally: Tally, labelOf: number[]): Contiguity {
  const { k, runs, expected, rows, metres, transitions, expectedRuns } = tally;
  const sum = (values: Float64Array) => values.reduce((total, value) => total + value, 0);
  const totalRuns = sum(runs);
  const varianceRuns = Math.max(0, tally.varianceRuns);
  let joins = 0;
  for (let g = 0; g < k; g++) joins += transitions[g * k + g]!;
  const classes = labelOf.map((label, g): ClassContiguity => {
    const kappa = expected[g]! > 0 ? 1 - runs[g]! / expected[g]! : null;
    const isScattered = kappa !== null && kappa < MERGE_KAPPA && rows[g]! < 2 * runs[g]!;
    return {
      label,
      rows: rows[g]!,
      metres: metres[g]!,
      runs: runs[g]!,
      expectedRuns: expected[g]!,
      kappa,
      meanRunM: runs[g]! > 0 ? metres[g]! / runs[g]! : 0,
      mergeWith: isScattered ? commonestNeighbour(transitions, k, g, labelOf) : null,
    };
  });
  return {
    classes,
    runs: totalRuns,
    expectedRuns,
    varianceRuns,
    z: varianceRuns > 0 ? (totalRuns - expectedRuns) / Math.sqrt(varianceRuns) : null,
    joins,
    expectedJoins: tally.expectedJoins,
    transitions,
    nUsed: sum(rows),
  };
}

/** The label most often above or below group g; null when it has no other neighbour. */
function commonestNeighbour(
  transitions: Float64Array,
  k: number,
  g: number,
  labelOf: number[],
): number | null {
  let best = -1;
  let bestCount = 0;
  for (let other = 0; other < k; other++) {
    const count = transitions[g * k + other]! + transitions[other * k + g]!;
    if (other === g || count <= bestCount) continue;
    best = other;
    bestCount = count;
  }
  return labelOf[best] ?? null;
}

/**
 * Chi-square and G of a transition table against independence of the class above and below, with
 * (K - 1)² degrees of freedom.
 *
 * @param transitions Row-major, shape (k, k), counts >= 0.
 * @throws {KernelError} `shape`.
 */
export function transitionStatistics(
  transitions: Float64Array,
  k: number,
): { chiSquare: number; g: number; degreesOfFreedom: number } {
  if (transitions.length !== k * k)
    throw new KernelError('shape', `${transitions.length} counts do not fill ${k} x ${k}`);
  const above = new Float64Array(k);
  const below = new Float64Array(k);
  let total = 0;
  for (let at = 0; at < k * k; at++) {
    above[Math.floor(at / k)]! += transitions[at]!;
    below[at % k]! += transitions[at]!;
    total += transitions[at]!;
  }
  let chiSquare = 0;
  let g = 0;
  for (let at = 0; at < k * k; at++) {
    const expected = (above[Math.floor(at / k)]! * below[at % k]!) / total;
    if (!(expected > 0)) continue;
    chiSquare += (transitions[at]! - expected) ** 2 / expected;
    if (transitions[at]! > 0) g += 2 * transitions[at]! * Math.log(transitions[at]! / expected);
  }
  return { chiSquare, g, degreesOfFreedom: (k - 1) ** 2 };
}
