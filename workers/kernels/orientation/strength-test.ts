import { KernelError } from '#kernels/kernel-error.ts';
import { seededRandom, type Random } from '#kernels/random.ts';
import { fabric } from './fabric.ts';
import { orientationTensor } from './orientation-tensor.ts';

/** Is a fabric stronger than chance gives: the strength of uniform axes, simulated. */
export interface StrengthTest {
  /** ln(S1 / S3) of the data; null when S3 is 0, which no uniform fabric reaches. */
  c: number | null;
  /** (1 + simulated fabrics as strong) / (draws + 1). */
  p: number;
  /** Strengths that 5 % and 1 % of uniform fabrics of this size pass. */
  critical: { c95: number; c99: number };
  draws: number;
}

const LEAST_AXES = 10;

/**
 * Tests Woodcock's strength C = ln(S1 / S3) against fabrics of n uniform axes.
 *
 * @param vectors Unit vectors, row-major, shape (n, 3), n >= 10.
 * @param options.draws Simulated fabrics, >= 99; 999 unless told.
 * @throws {KernelError} `shape`; `not-unit`; `too-few-rows`; `bad-parameter`.
 * @see Woodcock & Naylor (1983), Journal of Structural Geology 5, 539-548 (from memory).
 */
export function strengthTest(
  vectors: Float64Array,
  options: { seed: number; draws?: number; onProgress?: (share: number) => void },
): StrengthTest {
  const { seed, draws = 999, onProgress } = options;
  const { n, eigenvalues } = orientationTensor(vectors);
  if (n < LEAST_AXES) {
    throw new KernelError('too-few-rows', `expected at least ${LEAST_AXES} axes, found ${n}`, {
      found: n,
    });
  }
  if (!(Number.isInteger(draws) && draws >= 99)) {
    throw new KernelError('bad-parameter', `expected 99 or more draws, found ${draws}`);
  }
  const { c } = fabric(eigenvalues);
  const random = seededRandom(seed);
  const strengths = new Float64Array(draws);
  let reached = 0;
  for (let draw = 0; draw < draws; draw++) {
    const simulated = fabric(orientationTensor(uniformAxes(n, random)).eigenvalues).c ?? Infinity;
    strengths[draw] = simulated;
    if (c !== null && simulated >= c) reached++;
    onProgress?.((draw + 1) / draws);
  }
  strengths.sort();
  const passed = (share: number) => strengths[Math.ceil((1 - share) * (draws + 1)) - 1]!;
  return {
    c,
    p: (1 + reached) / (draws + 1),
    critical: { c95: passed(0.05), c99: passed(0.01) },
    draws,
  };
}

/** Uniform directions on the sphere, row-major (n, 3): height and longitude are uniform. */
export function uniformAxes(n: number, random: Random): Float64Array {
  const vectors = new Float64Array(3 * n);
  for (let row = 0; row < n; row++) {
    const z = 2 * random.uniform() - 1;
    const turn = 2 * Math.PI * random.uniform();
    const r = Math.sqrt(Math.max(0, 1 - z * z));
    vectors.set([r * Math.cos(turn), r * Math.sin(turn), z], 3 * row);
  }
  return vectors;
}
