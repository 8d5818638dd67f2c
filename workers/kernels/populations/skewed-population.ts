import { KernelError } from '#kernels/kernel-error.ts';
import { workingData } from './normal-mixture.ts';
import { emToRest } from './mixture-fit.ts';
import { binned, spreadOf, type MixtureData } from './mixture-data.ts';

/** A single population that is normal after a power transform of grade. */
export interface SkewedPopulation {
  /** Power of the transform: 0 lognormal, 1 normal; negative for a tail heavier than lognormal. */
  power: number;
  /** Log-likelihood of ln grade. */
  logLik: number;
  /** With three parameters: power, mean and spread. */
  bic: number;
}

const POWERS = { from: -2, to: 3 };
const BINS = 1000;

/**
 * The single population that fits best when its skewness is free: (g^λ - 1) / λ is normal. It tells
 * skewness from mixing: two lognormal populations deserve belief only when they explain more than
 * one skewed population does. Values below detection enter by the transformed limit.
 *
 * @param data ln grades from `mixtureData`.
 * @throws {KernelError} `too-few-rows` when ln grades do not vary.
 * @see Box & Cox (1964), JRSS B 26; MacLean, Morton, Elston & Yee (1976), Skewness in commingled
 *   distributions, Biometrics 32 (from memory).
 */
export function fitSkewedPopulation(data: MixtureData): SkewedPopulation {
  const { mean, sd } = spreadOf(data);
  if (!(sd > 0))
    throw new KernelError('too-few-rows', 'expected grades that vary, found one value');
  const points = binned(workingData(data), BINS);
  const scaled = { y: points.y.map((y) => y - mean), below: points.below.map((y) => y - mean) };
  const at = (power: number) => logLikAt({ ...points, ...scaled }, power);
  const power = maximise(at, POWERS.from, POWERS.to);
  const logLik = at(power);
  return { power, logLik, bic: -2 * logLik + 3 * Math.log(data.n) };
}

/** Log-likelihood of ln grade when the transform of this power is normal with its best moments. */
function logLikAt(data: MixtureData, power: number): number {
  const transform = (y: number) => (Math.abs(power) < 1e-8 ? y : Math.expm1(power * y) / power);
  const moved: MixtureData = {
    ...data,
    y: data.y.map(transform),
    below: data.below.map(transform),
    binVariance:
      data.binVariance?.map((variance, i) => variance * Math.exp(2 * power * data.y[i]!)) ?? null,
  };
  const { mean, sd } = spreadOf(moved);
  const limits = { minSd: 1e-9 * sd, shared: false };
  const rest = emToRest(moved, [{ share: 1, mean, sd }], limits, {
    maxSteps: 200,
    tolerance: 1e-10,
  });
  let slope = 0;
  for (let i = 0; i < data.y.length; i++) slope += data.weight[i]! * data.y[i]!;
  return rest.logLik + power * slope;
}

/** Place of the maximum of a single-peaked function, by golden sections, to 1e-4. */
function maximise(f: (x: number) => number, from: number, to: number): number {
  const ratio = (Math.sqrt(5) - 1) / 2;
  let [a, b] = [from, to];
  let [x, y] = [b - ratio * (b - a), a + ratio * (b - a)];
  let [fx, fy] = [f(x), f(y)];
  while (b - a > 1e-4) {
    if (fx >= fy) {
      [b, y, fy] = [y, x, fx];
      x = b - ratio * (b - a);
      fx = f(x);
    } else {
      [a, x, fx] = [x, y, fy];
      y = a + ratio * (b - a);
      fy = f(y);
    }
  }
  return (a + b) / 2;
}
