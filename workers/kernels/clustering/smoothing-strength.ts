import { KernelError } from '#kernels/kernel-error.ts';
import { likeliestChain, type ChainInput } from './chain-smoothing.ts';

/** A reward for agreeing neighbours and the runs it makes. */
export interface SmoothingStrength {
  beta: number;
  /** Metres over runs of the smoothed labels. */
  meanRunM: number;
  notes: string[];
}

/** Without a wanted run: neighbours in one group are three times as likely as not. */
export const DEFAULT_BETA = Math.log(3);
/** The reward is looked for up to here, to within this. */
const LARGEST_BETA = 40;
const BETA_STEP = 1e-3;

/**
 * The least reward whose labels have a mean run of at least the minimum selective length, by
 * bisection (runs grow with the reward, in jumps).
 *
 * @param minimumRunM > 0, m.
 * @throws {KernelError} `bad-parameter`; those of `likeliestChain`.
 */
export function strengthForRun(
  input: Omit<ChainInput, 'beta'>,
  minimumRunM: number,
): SmoothingStrength {
  if (!(minimumRunM > 0))
    throw new KernelError('bad-parameter', `expected a run > 0 m, found ${minimumRunM}`);
  const runAt = (beta: number): number =>
    meanRunM(input, likeliestChain({ ...input, beta }).labels);
  const raw = runAt(0);
  if (raw >= minimumRunM) return { beta: 0, meanRunM: raw, notes: [] };
  const most = runAt(LARGEST_BETA);
  if (most < minimumRunM) {
    const note = `no reward up to ${LARGEST_BETA} makes runs of ${minimumRunM} m: the sampled stretches are shorter, ${most} m on average at most`;
    return { beta: LARGEST_BETA, meanRunM: most, notes: [note] };
  }
  let [low, high] = [0, LARGEST_BETA];
  while (high - low > BETA_STEP) {
    const middle = (low + high) / 2;
    if (runAt(middle) >= minimumRunM) high = middle;
    else low = middle;
  }
  return { beta: high, meanRunM: runAt(high), notes: [] };
}

/** Labelled metres over runs of one label within a sequence; 0 without labels. */
function meanRunM(
  { sequence, fromM, toM }: Pick<ChainInput, 'sequence' | 'fromM' | 'toM'>,
  labels: Uint16Array,
): number {
  let metres = 0;
  let runs = 0;
  for (let row = 0; row < labels.length; row++) {
    if (labels[row] === 0) continue;
    metres += toM[row]! - fromM[row]!;
    if (row === 0 || labels[row] !== labels[row - 1] || sequence[row] !== sequence[row - 1])
      runs += 1;
  }
  return runs > 0 ? metres / runs : 0;
}
