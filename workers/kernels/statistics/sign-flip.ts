import { KernelError } from '#kernels/kernel-error.ts';
import { seededRandom } from '#kernels/random.ts';
import { requireFinite } from './require-finite.ts';

/** Does the mean of paired differences stand off zero. */
export interface SignFlipTest {
  mean: number;
  /** Two-sided. */
  p: number;
  /** Flips that reach the observed |mean|. */
  reached: number;
  /** Flips tried. */
  flips: number;
  enumerated: boolean;
}

const ENUMERATE_UP_TO = 12;

/**
 * Sign-flip permutation test: were the two sides of each pair alike, every difference could as well
 * have the other sign. All 2^m flips for up to 12 differences, else random ones with
 * p = (1 + number reaching) / (draws + 1).
 *
 * @param differences m differences, any unit.
 * @throws {KernelError} `too-few-rows`; `not-finite`; `bad-parameter` at draws < 1.
 * @see Fisher (1935), The Design of Experiments (from memory).
 */
export function signFlipTest(
  differences: Float64Array,
  options: { seed: number; draws?: number },
): SignFlipTest {
  requireFinite(differences, 'differences');
  const { seed, draws = 999 } = options;
  if (!(draws >= 1)) throw new KernelError('bad-parameter', `expected draws >= 1, found ${draws}`);
  const m = differences.length;
  const sum = differences.reduce((total, value) => total + value, 0);
  const scale = differences.reduce((total, value) => total + Math.abs(value), 0);
  const least = Math.abs(sum) - 1e-12 * scale;
  const enumerated = m <= ENUMERATE_UP_TO;
  const flips = enumerated ? 2 ** m : draws;
  const random = seededRandom(seed);
  let reached = 0;
  for (let flip = 0; flip < flips; flip++) {
    let flipped = 0;
    for (let i = 0, bits = 0; i < m; i++) {
      if (!enumerated && i % 32 === 0) bits = random.bits();
      const isFlipped = enumerated ? (flip >>> i) & 1 : (bits >>> (i % 32)) & 1;
      flipped += isFlipped ? -differences[i]! : differences[i]!;
    }
    if (Math.abs(flipped) >= least) reached += 1;
  }
  const p = enumerated ? reached / flips : (1 + reached) / (flips + 1);
  return { mean: sum / m, p, reached, flips, enumerated };
}
