import { KernelError } from '#kernels/kernel-error.ts';
import { seededRandom } from '#kernels/random.ts';
import { errorSource, redraw, type ErrorSource, type PartUnderError } from './assay-error.ts';
import type { Labels } from './group-moments.ts';
import type { OnProgress } from '#kernels/progress.ts';

/** Input of `membershipUnderError`. */
export interface MembershipUnderErrorInput {
  parts: readonly PartUnderError[];
  /** The frozen model: ppm columns to labels 1..K, 0 = unassigned. Nothing may be fitted in it. */
  assign: (columns: readonly Float64Array[]) => Labels;
  k: number;
  /** Interval lengths, m. */
  lengthM: Float64Array;
  seed: number;
  /** Default 200: standard errors of the probabilities up to .035. */
  draws?: number | undefined;
  /** Default .6 and .8 (this project's choice). */
  unstableBelow?: number | undefined;
  uncertainBelow?: number | undefined;
  onProgress?: OnProgress | undefined;
}

/** How often rows keep their group when measured again. */
export interface MembershipUnderError {
  /** Row-major, shape (n, K): share of draws in each group (the rest to 1 unassigned); NaN rows without a label. */
  probability: Float64Array;
  /** Label of the values as they are; 0 = unassigned. */
  labels: Uint16Array;
  /** Most frequent label over the draws (ties: the lowest), its share, and the entropy in nats. */
  likeliest: Uint16Array;
  largest: Float64Array;
  entropy: Float64Array;
  /** 1 where the row's own label has a share under `unstableBelow`. */
  unstable: Uint8Array;
  /** Per label 1..K: metres, and the share of them whose largest share is under `uncertainBelow`. */
  groups: { label: number; metres: number; uncertainShare: number | null }[];
  draws: number;
  notes: string[];
}

/**
 * How often an interval keeps its group when its assays are measured again: every part is redrawn with
 * its own error, parts independently (a bias of a whole batch is not covered), and assigned by the
 * frozen model. Draw b uses sub-seed seed + b.
 *
 * @throws {KernelError} `shape`, `too-few-parts`, `not-positive`, `bad-parameter`.
 * @see Thompson & Howarth (1976), Analyst 101, for s0 + k x (from memory); ordinary error propagation.
 */
export function membershipUnderError(input: MembershipUnderErrorInput): MembershipUnderError {
  const { parts, assign, k, lengthM, seed, draws = 200, onProgress } = input;
  const { unstableBelow = 0.6, uncertainBelow = 0.8 } = input;
  const n = lengthM.length;
  if (parts.length === 0) throw new KernelError('too-few-parts', 'expected at least one part');
  for (const [name, value] of Object.entries({ k, draws })) {
    if (value >= 1 && value <= 1e5 && Math.floor(value) === value) continue;
    throw new KernelError(
      'bad-parameter',
      `expected ${name} a whole number from 1, found ${value}`,
    );
  }
  const sources = parts.map((part, index) => errorSource(part, index, n));
  const labels = checked(assign(parts.map((part) => part.values)), n, k);
  const counts = new Float64Array(n * k);
  const columns = sources.map(() => new Float64Array(n));
  for (let b = 0; b < draws; b++) {
    const random = seededRandom(seed + b);
    for (const [j, source] of sources.entries()) redraw(source, random, columns[j]!);
    const drawn = checked(assign(columns), n, k);
    for (let row = 0; row < n; row++) if (drawn[row]! > 0) counts[row * k + drawn[row]! - 1]! += 1;
    onProgress?.((b + 1) / draws);
  }
  const probability = counts.map((count, at) =>
    labels[Math.floor(at / k)]! > 0 ? count / draws : NaN,
  );
  const rows = summarised(probability, labels, k, unstableBelow);
  const groups = Array.from({ length: k }, (_, c) =>
    groupOf(c + 1, labels, rows.largest, lengthM, uncertainBelow),
  );
  return { probability, labels, ...rows, groups, draws, notes: notesOf(parts, sources) };
}

function checked(found: Labels, n: number, k: number): Uint16Array {
  if (found.length !== n) throw new KernelError('shape', `${found.length} labels for ${n} rows`);
  for (let row = 0; row < n; row++) {
    const label = found[row]!;
    if (label >= 0 && label <= k && Math.floor(label) === label) continue;
    throw new KernelError(
      'bad-parameter',
      `expected a label from 0 to ${k}, found ${label} in row ${row}`,
      { row },
    );
  }
  return Uint16Array.from(found);
}

function summarised(
  probability: Float64Array,
  labels: Uint16Array,
  k: number,
  unstableBelow: number,
) {
  const n = labels.length;
  const out = {
    likeliest: new Uint16Array(n),
    largest: new Float64Array(n).fill(NaN),
    entropy: new Float64Array(n).fill(NaN),
    unstable: new Uint8Array(n),
  };
  for (let row = 0; row < n; row++) {
    if (labels[row] === 0) continue;
    const shares = probability.subarray(row * k, (row + 1) * k);
    const most = shares.reduce((a, b) => Math.max(a, b), 0);
    out.largest[row] = most;
    out.likeliest[row] = most > 0 ? shares.indexOf(most) + 1 : 0;
    out.entropy[row] = shares.reduce(
      (sum, share) => (share > 0 ? sum - share * Math.log(share) : sum),
      0,
    );
    out.unstable[row] = shares[labels[row]! - 1]! < unstableBelow ? 1 : 0;
  }
  return out;
}

function groupOf(
  label: number,
  labels: Uint16Array,
  largest: Float64Array,
  lengthM: Float64Array,
  uncertainBelow: number,
) {
  let metres = 0;
  let uncertain = 0;
  labels.forEach((own, row) => {
    if (own !== label) return;
    metres += lengthM[row]!;
    if (largest[row]! < uncertainBelow) uncertain += lengthM[row]!;
  });
  return { label, metres, uncertainShare: metres > 0 ? uncertain / metres : null };
}

function notesOf(parts: readonly PartUnderError[], sources: readonly ErrorSource[]): string[] {
  const notes: string[] = [];
  const exact = parts.filter((part) => part.error === null).length;
  if (exact > 0)
    notes.push(`${exact} of ${parts.length} parts have no known error and stayed as they are`);
  const capped = sources.reduce((sum, source) => sum + source.nCapped, 0);
  if (capped > 0)
    notes.push(`${capped} values have an error larger than themselves: it was held at the value`);
  const kept = sources.reduce((sum, source) => sum + source.nKept, 0);
  if (kept > 0)
    notes.push(`${kept} values below detection have no fitted distribution and stayed as replaced`);
  return notes;
}
