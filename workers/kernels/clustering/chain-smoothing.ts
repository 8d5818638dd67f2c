import { KernelError } from '#kernels/kernel-error.ts';

/** Memberships down the holes and how strongly neighbours should agree. */
export interface ChainInput {
  /** Row-major, shape (n, K): probability of each group, >= 0; a NaN row ends the chain and stays unassigned. */
  membership: Float64Array;
  k: number;
  /** Sequence of each row, rows of one sequence together; never crossed. */
  sequence: ArrayLike<number>;
  fromM: Float64Array;
  toM: Float64Array;
  /** Reward for two neighbours in one group, natural log, >= 0. */
  beta: number;
  /** Unsampled metres over which the reward fades to 1/e, > 0. */
  fadeM: number;
  /**
   * ln probability of a step from group to group down the hole, shape (K, K), in place of the reward
   * (`logTransitions`); it fades with a gap in the same way.
   */
  logTransition?: Float64Array | undefined;
}

/** Least probability of a group, so that one row cannot rule a group out. */
const LEAST = 1e-12;

/** A stretch of complete rows of one sequence. */
interface Stretch {
  start: number;
  end: number;
}

/**
 * Most likely labels of a chain: maximises Σ ln p_i(z_i) + Σ β' 1[z_i = z_{i+1}] by Viterbi's
 * recursion in each sequence, β' = β exp(-gap / fade). With β = 0 every row has its likeliest group.
 *
 * @returns 1..K per row (0 where the membership is missing) and the maximum, summed over sequences.
 * @throws {KernelError} `shape`; `bad-parameter` for β, the fade, a probability, a depth or a
 *   transition.
 * @see Viterbi (1967), IEEE Trans. Inf. Theory 13; Rabiner (1989), Proc. IEEE 77; Besag (1986), JRSS B
 *   48 (from memory).
 */
export function likeliestChain(input: ChainInput): { labels: Uint16Array; score: number } {
  const chain = prepared(input);
  const { k, logs } = chain;
  const labels = new Uint16Array(input.membership.length / k);
  let score = 0;
  for (const { start, end } of chain.stretches) {
    const back = new Uint16Array((end - start) * k);
    let best = Float64Array.from(logs.subarray(start * k, (start + 1) * k));
    for (let row = start + 1; row < end; row++) {
      const next = new Float64Array(k);
      for (let to = 0; to < k; to++) {
        let from = 0;
        for (let c = 1; c < k; c++)
          if (best[c]! + chain.step(row, c, to) > best[from]! + chain.step(row, from, to)) from = c;
        back[(row - start) * k + to] = from;
        next[to] = best[from]! + chain.step(row, from, to) + logs[row * k + to]!;
      }
      best = next;
    }
    let at = best.indexOf(Math.max(...best));
    score += best[at]!;
    for (let row = end - 1; row >= start; row--) {
      labels[row] = at + 1;
      at = back[(row - start) * k + at]!;
    }
  }
  return { labels, score };
}

/**
 * Smoothed memberships of the same chain by the forward-backward recursion.
 *
 * @returns Row-major, shape (n, K), rows sum to 1; NaN where the membership is missing.
 * @throws {KernelError} As `likeliestChain`.
 */
export function chainMarginals(input: ChainInput): Float64Array {
  const chain = prepared(input);
  const { k, logs } = chain;
  const out = new Float64Array(input.membership.length).fill(NaN);
  for (const { start, end } of chain.stretches) {
    const forward = logs.slice(start * k, end * k);
    for (let row = start + 1; row < end; row++) {
      const at = (row - start) * k;
      for (let to = 0; to < k; to++)
        forward[at + to]! += logSum(k, (c) => forward[at - k + c]! + chain.step(row, c, to));
    }
    let behind = new Float64Array(k);
    for (let row = end - 1; row >= start; row--) {
      const at = (row - start) * k;
      const total = logSum(k, (c) => forward[at + c]! + behind[c]!);
      for (let c = 0; c < k; c++)
        out[row * k + c] = Math.exp(forward[at + c]! + behind[c]! - total);
      const ahead = behind;
      behind = new Float64Array(k).map((_, from) =>
        logSum(k, (to) => chain.step(row, from, to) + logs[row * k + to]! + ahead[to]!),
      );
    }
  }
  return out;
}

function logSum(k: number, term: (c: number) => number): number {
  let top = -Infinity;
  for (let c = 0; c < k; c++) top = Math.max(top, term(c));
  let sum = 0;
  for (let c = 0; c < k; c++) sum += Math.exp(term(c) - top);
  return top + Math.log(sum);
}

/** ln memberships, the stretches, and the reward of a step into `row`. */
function prepared(input: ChainInput) {
  const { membership, k, sequence, fromM, toM, beta, fadeM, logTransition } = input;
  const n = sequence.length;
  if (
    membership.length !== n * k ||
    fromM.length !== n ||
    toM.length !== n ||
    (logTransition && logTransition.length !== k * k)
  ) {
    const message = `expected ${n} rows of ${k} memberships, as many depths and ${k} x ${k} transitions; found ${membership.length}, ${fromM.length}, ${toM.length} and ${logTransition?.length ?? 'none'}`;
    throw new KernelError('shape', message);
  }
  if (!(beta >= 0 && beta < Infinity && fadeM > 0)) {
    const message = `expected beta >= 0 and a fade > 0 m, found ${beta} and ${fadeM}`;
    throw new KernelError('bad-parameter', message);
  }
  const logs = membership.map((p, at) => {
    if (p < 0 || p > 1 + 1e-9)
      throw new KernelError(
        'bad-parameter',
        `expected a probability, found ${p} in row ${Math.floor(at / k)}`,
        { row: Math.floor(at / k) },
      );
    return Math.log(Math.max(p, LEAST));
  });
  const bad = fromM.findIndex((from, row) => !Number.isFinite(from) || !Number.isFinite(toM[row]));
  if (bad >= 0) {
    const message = `expected depths, found ${fromM[bad]} to ${toM[bad]} m in row ${bad}`;
    throw new KernelError('bad-parameter', message, { row: bad });
  }
  if (logTransition && !logTransition.every(Number.isFinite)) {
    const message = `expected finite ln probabilities of steps, found ${logTransition.join(', ')}`;
    throw new KernelError('bad-parameter', message);
  }
  // Rewards fade over core that was not sampled; touching intervals keep them whole.
  const fade = fromM.map((from, row) =>
    row === 0 ? 1 : Math.exp(-Math.max(0, from - toM[row - 1]!) / fadeM),
  );
  const step = logTransition
    ? (row: number, from: number, to: number) => fade[row]! * logTransition[from * k + to]!
    : (row: number, from: number, to: number) => (from === to ? fade[row]! * beta : 0);
  return { k, logs, step, stretches: stretchesOf(membership, k, sequence) };
}

function stretchesOf(membership: Float64Array, k: number, sequence: ArrayLike<number>): Stretch[] {
  const isComplete = (row: number): boolean => {
    for (let c = 0; c < k; c++) if (Number.isNaN(membership[row * k + c]!)) return false;
    return true;
  };
  const stretches: Stretch[] = [];
  for (let row = 0; row < sequence.length; row++) {
    if (!isComplete(row)) continue;
    const open = stretches[stretches.length - 1];
    if (open?.end === row && sequence[row] === sequence[row - 1]) open.end = row + 1;
    else stretches.push({ start: row, end: row + 1 });
  }
  return stretches;
}

/**
 * ln probabilities of a step from group to group, each count raised by 1.
 *
 * @param counts Row-major, shape (k, k): steps down the hole (`contiguity(...).transitions`).
 * @throws {KernelError} `shape`; `bad-parameter` at a count that is negative or not finite.
 */
export function logTransitions(counts: Float64Array, k: number): Float64Array {
  if (counts.length !== k * k)
    throw new KernelError('shape', `${counts.length} counts do not fill ${k} x ${k}`);
  const bad = counts.findIndex((count) => !(count >= 0 && count < Infinity));
  if (bad >= 0)
    throw new KernelError('bad-parameter', `expected a count >= 0, found ${counts[bad]}`);
  return counts.map((count, at) => {
    const row = at - (at % k);
    const total = counts.subarray(row, row + k).reduce((sum, value) => sum + value + 1, 0);
    return Math.log((count + 1) / total);
  });
}
