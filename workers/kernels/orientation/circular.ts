import { KernelError } from '#kernels/kernel-error.ts';

/** Mean and spread of angles on a circle. */
export interface CircularSummary {
  n: number;
  /** 0..360, axial 0..180; null when the angles cancel. */
  meanDeg: number | null;
  /** Mean resultant length 0..1, of the doubled angles when axial. */
  meanResultant: number;
  /** sqrt(-2 ln meanResultant) in radians of the analysed (doubled when axial) angles; null at 0. */
  sdRad: number | null;
  /** Von Mises concentration by maximum likelihood; null when all angles are the same. */
  kappa: number | null;
  /** Rayleigh's n meanResultant^2 and the p of no preferred direction. */
  rayleighZ: number;
  rayleighP: number;
}

/**
 * Summary of azimuths or, axial, of strikes (010 is 190).
 *
 * @param anglesDeg Angles in degrees, any turn.
 * @throws {KernelError} `too-few-rows`; `not-finite` with { row }.
 * @see Fisher (1993), Statistical Analysis of Circular Data, Cambridge University Press; Mardia &
 *   Jupp (2000), Directional Statistics, Wiley, for the Rayleigh correction below n = 50.
 */
export function circularSummary(
  anglesDeg: Float64Array,
  options: { axial: boolean },
): CircularSummary {
  const n = anglesDeg.length;
  if (n === 0) throw new KernelError('too-few-rows', 'expected angles, found none');
  const turns = options.axial ? 2 : 1;
  let sine = 0;
  let cosine = 0;
  anglesDeg.forEach((angle, row) => {
    if (!Number.isFinite(angle)) {
      throw new KernelError('not-finite', `expected an angle, found ${angle} in row ${row}`, {
        row,
      });
    }
    sine += Math.sin((turns * angle * Math.PI) / 180);
    cosine += Math.cos((turns * angle * Math.PI) / 180);
  });
  const meanResultant = Math.min(1, Math.hypot(sine, cosine) / n);
  const vanishes = meanResultant < 1e-9;
  const angle = ((Math.atan2(sine, cosine) * 180) / Math.PI + 360) % 360;
  const rayleighZ = n * meanResultant * meanResultant;
  return {
    n,
    meanDeg: vanishes ? null : angle / turns,
    meanResultant,
    sdRad: vanishes ? null : Math.sqrt(-2 * Math.log(meanResultant)),
    kappa: 1 - meanResultant < 1e-12 ? null : vonMisesKappa(meanResultant),
    rayleighZ,
    rayleighP: rayleighP(rayleighZ, n),
  };
}

function rayleighP(z: number, n: number): number {
  if (n >= 50) return Math.exp(-z);
  const first = (2 * z - z * z) / (4 * n);
  const second = (24 * z - 132 * z ** 2 + 76 * z ** 3 - 9 * z ** 4) / (288 * n * n);
  return Math.min(1, Math.max(0, Math.exp(-z) * (1 + first - second)));
}

/** Piecewise start for the concentration. @see Best & Fisher (1981), Communications in Statistics B10. */
export function vonMisesKappaStart(r: number): number {
  if (r < 0.53) return 2 * r + r ** 3 + (5 * r ** 5) / 6;
  if (r < 0.85) return -0.4 + 1.39 * r + 0.43 / (1 - r);
  return 1 / (r ** 3 - 4 * r ** 2 + 3 * r);
}

/**
 * Concentration k that solves I1(k) / I0(k) = mean resultant length, by Newton's steps.
 *
 * @param meanResultant In [0, 1).
 * @throws {KernelError} `bad-parameter`.
 */
export function vonMisesKappa(meanResultant: number): number {
  if (!(meanResultant >= 0 && meanResultant < 1)) {
    throw new KernelError(
      'bad-parameter',
      `expected a mean resultant in [0, 1), found ${meanResultant}`,
    );
  }
  let k = vonMisesKappaStart(meanResultant);
  for (let step = 0; step < 50 && k > 1e-9; step++) {
    const ratio = besselRatio(k);
    const next = k - (ratio - meanResultant) / (1 - ratio / k - ratio * ratio);
    if (Math.abs(next - k) <= 1e-13 * k) return next;
    k = next;
  }
  return k;
}

/**
 * I1(k) / I0(k), k >= 0, by its continued fraction 1/(2/k + 1/(4/k + ...)), evaluated backwards; for
 * large k by the asymptotic series.
 *
 * @throws {KernelError} `bad-parameter`.
 * @see Abramowitz & Stegun (1964) 9.6.26 and 9.7.1.
 */
export function besselRatio(k: number): number {
  if (!(k >= 0)) throw new KernelError('bad-parameter', `expected an argument >= 0, found ${k}`);
  if (k > 700) return 1 - 1 / (2 * k) - 1 / (8 * k * k) - 1 / (8 * k ** 3) - 25 / (128 * k ** 4);
  let fraction = 0;
  for (let m = Math.ceil(k) + 60; m >= 1; m--) fraction = 1 / ((2 * m) / k + fraction);
  return fraction;
}
