import { Matrix, SVD } from 'ml-matrix';
import { KernelError } from '#kernels/kernel-error.ts';
import { seededRandom, type Random } from '#kernels/random.ts';
import { kMeans } from './k-means.ts';
import { packPoints } from './points.ts';
import type { OnProgress } from '#kernels/progress.ts';

/** Input of `gapStatistic`. */
export interface GapInput {
  /** p columns of n rows in the clustering space; rows with NaN are left out. */
  columns: readonly Float64Array[];
  /** Largest number of groups tried, from 1 on. */
  kTo: number;
  seed: number;
  /** Reference tables drawn, default 100. */
  references?: number | undefined;
  /** k-means restarts for every table and k, default 10. */
  restarts?: number | undefined;
  onProgress?: OnProgress | undefined;
}

/** Gap of one number of groups. */
export interface GapRow {
  k: number;
  /** Mean ln W of the reference tables less ln W of the data; null when W is 0. */
  gap: number | null;
  /** Standard deviation of the reference ln W times √(1 + 1/B). */
  standardError: number;
}

/** Gaps side by side. */
export interface GapStatistic {
  rows: GapRow[];
  /** The least k with gap(k) >= gap(k + 1) - s(k + 1); null when there is none below `kTo`. */
  suggestedK: number | null;
  references: number;
}

/**
 * Gap statistic: how much lower the total squared distance W falls with k groups than in structureless
 * tables, drawn evenly from the box along the principal axes of the data.
 *
 * @throws {KernelError} `bad-parameter`; those of `kMeans`, among them `too-few-rows`.
 * @see Tibshirani, Walther & Hastie (2001), JRSS B 63.
 */
export function gapStatistic(input: GapInput): GapStatistic {
  const { columns, kTo, seed, references = 100, restarts = 10, onProgress } = input;
  for (const [name, value] of Object.entries({ kTo, references, restarts })) {
    if (value >= 1 && value <= 1000 && Math.floor(value) === value) continue;
    throw new KernelError(
      'bad-parameter',
      `expected ${name} a whole number from 1 to 1000, found ${value}`,
    );
  }
  const { points, n, p } = packPoints(columns);
  const logW = (table: readonly Float64Array[], k: number): number =>
    Math.log(kMeans({ columns: table, k, seed, restarts }).inertia);
  const ks = Array.from({ length: kTo }, (_, i) => i + 1);
  const observed = ks.map((k) => logW(columns, k));
  const draw = boxSampler(points, n, p);
  const expected = ks.map((): number[] => []);
  for (let b = 0; b < references; b++) {
    const table = draw(seededRandom(seed + 1 + b));
    for (const [i, k] of ks.entries()) expected[i]!.push(logW(table, k));
    onProgress?.((b + 1) / references);
  }
  const rows = ks.map((k, i): GapRow => {
    const { mean, sd } = momentsOf(expected[i]!);
    const gap = mean - observed[i]!;
    return {
      k,
      gap: Number.isFinite(gap) ? gap : null,
      standardError: sd * Math.sqrt(1 + 1 / references),
    };
  });
  return { rows, suggestedK: firstSufficient(rows), references };
}

function firstSufficient(rows: readonly GapRow[]): number | null {
  for (const [i, { k, gap }] of rows.entries()) {
    const next = rows[i + 1];
    if (gap === null || !next || next.gap === null) continue;
    if (gap >= next.gap - next.standardError) return k;
  }
  return null;
}

/** Mean and standard deviation with denominator B. */
function momentsOf(values: readonly number[]): { mean: number; sd: number } {
  const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
  const squares = values.reduce((sum, value) => sum + (value - mean) ** 2, 0);
  return { mean, sd: Math.sqrt(squares / values.length) };
}

/** Draws tables of n rows, even over the box of the data along its principal axes. */
function boxSampler(
  points: Float64Array,
  n: number,
  p: number,
): (random: Random) => Float64Array[] {
  const table = Matrix.from1DArray(n, p, points).center('column');
  const { rightSingularVectors: axes } = new SVD(table, { autoTranspose: true });
  const scores = table.mmul(axes);
  const span = Array.from({ length: axes.columns }, (_, j) => {
    const column = scores.getColumn(j);
    const least = column.reduce((a, b) => Math.min(a, b), Infinity);
    return { least, width: column.reduce((a, b) => Math.max(a, b), -Infinity) - least };
  });
  return (random) => {
    const drawn = Matrix.zeros(n, span.length);
    for (let i = 0; i < n; i++)
      for (const [j, { least, width }] of span.entries())
        drawn.set(i, j, least + width * random.uniform());
    const back = drawn.mmul(axes.transpose());
    return Array.from({ length: p }, (_, j) => Float64Array.from(back.getColumn(j)));
  };
}
