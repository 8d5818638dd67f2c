import { variation } from '#kernels/compositions/variation.ts';
import { KernelError } from '#kernels/kernel-error.ts';

/** Two elements and whether their ratio stays fixed within one unit. */
export interface ElementPair {
  first: string;
  second: string;
  /** var ln(first / second). */
  variance: number;
  /** Correlation of the line through the origin, the worse of both directions; null when constant. */
  correlation: number | null;
  isImmobile: boolean;
}

/** Rules of this project: editable, no published source. */
export interface ImmobileRules {
  /** Share of pairs, by lowest variance, that may count as immobile. */
  lowestShare: number;
  leastCorrelation: number;
}

export const DEFAULT_IMMOBILE_RULES: ImmobileRules = { lowestShare: 0.1, leastCorrelation: 0.9 };

/**
 * Elements usually immobile in alteration (from memory). Zr, Nb, Ti and Th only where the digestion
 * opens their minerals: compare with a fusion first.
 */
export const IMMOBILE_CANDIDATES = ['Al', 'Ti', 'Zr', 'Nb', 'Th', 'Sc', 'Ga'] as const;

/**
 * Ranks the pairs of elements of one unit by how little their ratio varies. A pair counts as immobile
 * when its log-ratio variance is among the lowest share of pairs (one at least) and its points follow
 * a line through the origin.
 *
 * @param parts Row-major (nRows, elements), one unit, every value > 0: rows of one unit.
 * @returns Pairs by ascending variance.
 * @throws {KernelError} `shape`, `not-positive`; `too-few-rows` under 10; `bad-parameter` at a rule.
 * @see Grant (1986), Economic Geology 81, 1976-1982; MacLean & Barrett (1993), Journal of Geochemical
 *   Exploration 48, 109-133 (from memory).
 */
export function immobilePairs(
  parts: Float64Array,
  elements: readonly string[],
  rules: ImmobileRules = DEFAULT_IMMOBILE_RULES,
): ElementPair[] {
  const { lowestShare, leastCorrelation } = rules;
  if (!(lowestShare > 0 && lowestShare <= 1 && leastCorrelation >= 0 && leastCorrelation <= 1)) {
    const message = `expected a share in (0, 1] and a correlation in [0, 1], found ${lowestShare}, ${leastCorrelation}`;
    throw new KernelError('bad-parameter', message);
  }
  const n = elements.length;
  const nRows = parts.length / n;
  if (nRows < LEAST_ROWS) {
    throw new KernelError(
      'too-few-rows',
      `expected at least ${LEAST_ROWS} rows of one unit, found ${nRows}`,
    );
  }
  const { matrix } = variation(parts, n);
  const pairs = elements.flatMap((first, i) =>
    elements.slice(i + 1).map((second, k) => {
      const j = i + 1 + k;
      const correlation = throughOrigin(parts, n, i, j);
      return { first, second, variance: matrix[i * n + j]!, correlation, isImmobile: false };
    }),
  );
  const ranked = pairs.sort((a, b) => a.variance - b.variance);
  const most = Math.max(1, Math.floor(lowestShare * ranked.length));
  return ranked.map((pair, rank) => {
    // a ratio that never changes is fixed even where the elements do not vary
    const follows =
      pair.correlation === null ? pair.variance < 1e-12 : pair.correlation >= leastCorrelation;
    return { ...pair, isImmobile: rank < most && follows };
  });
}

const LEAST_ROWS = 10;

/** sqrt(1 - residual / total about the mean) of y = b x, the worse of y on x and x on y. */
function throughOrigin(parts: Float64Array, n: number, i: number, j: number): number | null {
  const nRows = parts.length / n;
  let [sx, sy, sxx, syy, sxy] = [0, 0, 0, 0, 0];
  for (let at = 0; at < parts.length; at += n) {
    const [x, y] = [parts[at + i]!, parts[at + j]!];
    sx += x;
    sy += y;
    sxx += x * x;
    syy += y * y;
    sxy += x * y;
  }
  const [totalX, totalY] = [sxx - (sx * sx) / nRows, syy - (sy * sy) / nRows];
  if (totalX <= 1e-12 * sxx || totalY <= 1e-12 * syy) return null;
  const worst = Math.max((syy - (sxy * sxy) / sxx) / totalY, (sxx - (sxy * sxy) / syy) / totalX);
  return Math.sqrt(Math.max(0, 1 - worst));
}

/**
 * Natural log-ratio of two elements, row by row: an axis that tells protoliths apart (Al/Ti, Ti/Zr,
 * Al/Sc, Nb/Ti).
 *
 * @param first, second n values each in one unit, NaN where not assayed.
 * @returns NaN where a value is missing.
 * @throws {KernelError} `shape`; `not-positive` with { row } at a value <= 0.
 */
export function lnRatio(first: Float64Array, second: Float64Array): Float64Array {
  if (first.length !== second.length) {
    const message = `expected as many values, found ${first.length} and ${second.length}`;
    throw new KernelError('shape', message);
  }
  return first.map((value, row) => {
    const other = second[row]!;
    if (value <= 0 || other <= 0 || Math.abs(value - other) === Infinity) {
      const message = `expected finite values > 0, found ${value} and ${other} in row ${row}`;
      throw new KernelError('not-positive', message, { row });
    }
    return Math.log(value / other);
  });
}
