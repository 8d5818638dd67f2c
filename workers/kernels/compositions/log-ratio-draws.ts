import { inverse, Matrix } from 'ml-matrix';
import { cholesky } from '#kernels/components/cholesky.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { normalCdf, normalQuantile } from '#kernels/normal.ts';
import { seededRandom, type Random } from '#kernels/random.ts';
import { prepareLogRatios, type CensoredLogRatios } from './censored-log-ratios.ts';
import { replaceByLogRatioEm } from './log-ratio-em.ts';

/** One value below detection, drawn several times. */
export interface DrawnCell {
  row: number;
  part: number;
  /** One value per draw, each under the limit of the cell. */
  values: Float64Array;
}

export interface LogRatioDraws {
  cells: DrawnCell[];
  denominator: number;
  nDraws: number;
  notes: string[];
}

export interface LogRatioDrawOptions {
  seed: number;
  /** Tables drawn. */
  draws?: number;
  /** Rounds between tables kept, and before the first. */
  rounds?: number;
  onProgress?: (share: number) => void;
}

/**
 * Draws values below detection several times over, to carry their uncertainty on: from the truncated
 * normal of each log-ratio given the others, and from the posterior of mean and covariance (data
 * augmentation with an uninformative prior), starting at {@link replaceByLogRatioEm}.
 *
 * @param columns, states As for {@link replaceByLogRatioEm}. Not modified.
 * @returns The cells below detection of rows that miss no part, by row and part.
 * @throws {KernelError} As {@link replaceByLogRatioEm}; `singular` when a ratio does not vary on its
 *   own.
 * @see Palarea-Albaladejo & Martin-Fernandez (2015), Chemometr. Intell. Lab. Syst. 143 (from memory); Schafer (1997), Analysis of Incomplete Multivariate Data, Chapman & Hall.
 */
export function drawByLogRatio(
  columns: readonly Float64Array[],
  states: readonly Uint8Array[],
  options: LogRatioDrawOptions,
): LogRatioDraws {
  const { seed, draws = 5, rounds = 20, onProgress } = options;
  if (!Number.isInteger(draws) || draws < 1 || !Number.isInteger(rounds) || rounds < 1) {
    const message = `expected at least 1 draw and 1 round, found ${draws} and ${rounds}`;
    throw new KernelError('bad-parameter', message);
  }
  const start = replaceByLogRatioEm(columns, states);
  const table = prepareLogRatios(columns, states);
  const { cells, p, partOf, rows, denominator } = table;
  const rowAt = (at: number) => rows[Math.floor(at / p)]!;
  for (const { at } of cells) {
    const value = start.columns[partOf[at % p]!]![rowAt(at)]!;
    table.ratios[at] = Math.log(value / columns[denominator]![rowAt(at)]!);
  }
  const drawn = cells.map(({ at }) => ({
    row: rowAt(at),
    part: partOf[at % p]!,
    values: new Float64Array(draws),
  }));
  const random = seededRandom(seed);
  for (let draw = 0; draw < draws && cells.length > 0; draw++) {
    for (let round = 0; round < rounds; round++) {
      onProgress?.((draw + round / rounds) / draws);
      drawCells(table, drawModel(table, random), random);
    }
    cells.forEach(({ at, limit }, i) => {
      const scale = columns[denominator]![rowAt(at)]!;
      drawn[i]!.values[draw] = scale * Math.exp(Math.min(table.ratios[at]!, limit - 1e-12));
    });
  }
  return { cells: drawn, denominator, nDraws: draws, notes: start.notes };
}

interface DrawnModel {
  mean: number[];
  /** Inverse covariance. */
  precision: Matrix;
}

/**
 * Covariance from its inverse Wishart posterior by Bartlett's decomposition, then the mean given it:
 * with (n - 1) S = L L' and a random lower triangle A, covariance M M' with M = L A^-T.
 */
function drawModel({ ratios, n, p }: CensoredLogRatios, random: Random): DrawnModel {
  const table = Matrix.from1DArray(n, p, Array.from(ratios));
  const mean = table.mean('column');
  const centred = table.subRowVector(mean);
  const lower = Float64Array.from(centred.transpose().mmul(centred).to1DArray());
  if (cholesky(lower, p) === null) {
    throw new KernelError('singular', 'expected log-ratios that vary on their own');
  }
  const triangle = new Matrix(p, p);
  for (let i = 0; i < p; i++) for (let j = 0; j <= i; j++) triangle.set(i, j, lower[i * p + j]!);
  const a = Matrix.zeros(p, p);
  for (let i = 0; i < p; i++) {
    a.set(i, i, Math.sqrt(2 * drawGamma((n - 1 - i) / 2, random)));
    for (let j = 0; j < i; j++) a.set(i, j, random.normal());
  }
  const root = triangle.mmul(inverse(a).transpose());
  const back = inverse(root);
  const standard = Matrix.columnVector(Array.from({ length: p }, () => random.normal()));
  const shift = root.mmul(standard).to1DArray();
  return {
    mean: mean.map((value, i) => value + shift[i]! / Math.sqrt(n)),
    precision: back.transpose().mmul(back),
  };
}

/** Draws each cell given the others of its row, below its limit. */
function drawCells(
  { ratios, p, cells }: CensoredLogRatios,
  { mean, precision }: DrawnModel,
  random: Random,
): void {
  const q = precision.to2DArray();
  for (const { at, limit } of cells) {
    const j = at % p;
    const row = q[j]!;
    let pull = 0;
    for (let k = 0; k < p; k++) {
      if (k !== j) pull += row[k]! * (ratios[at - j + k]! - mean[k]!);
    }
    const centre = mean[j]! - pull / row[j]!;
    const sd = 1 / Math.sqrt(row[j]!);
    ratios[at] = centre + sd * drawBelow((limit - centre) / sd, random);
  }
}

/** Standard normal known to lie below z. */
function drawBelow(z: number, random: Random): number {
  const u = 1 - random.uniform();
  // Far down the tail is exponential with rate |z|.
  if (z < -30) return z + Math.log(u) / -z;
  return Math.min(normalQuantile(u * normalCdf(z)), z);
}

/**
 * Gamma of a shape >= 1/2 and scale 1, by squeezing a cubed normal.
 *
 * @see Marsaglia & Tsang (2000), A simple method for generating gamma variables, ACM TOMS 26.
 */
function drawGamma(shape: number, random: Random): number {
  if (shape < 1) {
    return drawGamma(shape + 1, random) * (1 - random.uniform()) ** (1 / shape);
  }
  const d = shape - 1 / 3;
  for (;;) {
    const x = random.normal();
    const v = (1 + x / Math.sqrt(9 * d)) ** 3;
    if (v <= 0) continue;
    if (Math.log(1 - random.uniform()) < 0.5 * x * x + d * (1 - v + Math.log(v))) return d * v;
  }
}
