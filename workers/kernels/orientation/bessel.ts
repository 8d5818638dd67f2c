import { KernelError } from '#kernels/kernel-error.ts';

/** Below this the power series is used, above it the asymptotic one. */
const SWITCH = 20;

/**
 * exp(-x) I0(x), the scaled modified Bessel function of order 0, relative error about 1e-15. No
 * library of the project has it.
 *
 * @param x >= 0.
 * @throws {KernelError} `bad-parameter`.
 * @see Abramowitz & Stegun (1964), Handbook of Mathematical Functions, 9.6.12 and 9.7.1.
 */
export function scaledBesselI0(x: number): number {
  if (!(x >= 0)) throw new KernelError('bad-parameter', `expected an argument >= 0, found ${x}`);
  let term = 1;
  let sum = 1;
  if (x < SWITCH) {
    for (let k = 1; term > 1e-17 * sum; k++) {
      term *= (x * x) / (4 * k * k);
      sum += term;
    }
    return Math.exp(-x) * sum;
  }
  for (let k = 1; term > 1e-17 && k < SWITCH; k++) {
    term *= (2 * k - 1) ** 2 / (8 * k * x);
    sum += term;
  }
  return sum / Math.sqrt(2 * Math.PI * x);
}
