import { KernelError } from '#kernels/kernel-error.ts';
import { seededRandom } from '#kernels/random.ts';
import { association } from '#kernels/tables/association.ts';
import { checkCategory, NOT_LOGGED, type Category } from '#kernels/tables/category.ts';
import { chiSquareTest } from '#kernels/tables/chi-square.ts';
import { crossTabulate } from '#kernels/tables/cross-tabulation.ts';
import { checkHoleStarts } from '#kernels/tables/hole-shift.ts';

/** Do people log the same ground under different codes. */
export interface LoggerEffect {
  /** The geology looked inside. */
  parent: string;
  n: number;
  chiSquare: number;
  /** Bias-corrected V of code and logger; null when n is too small for it. */
  v: number | null;
  /** By dealing the loggers out to whole holes anew. */
  p: number;
  /** Holes with rows in this geology; with few of them p cannot be small. */
  holes: number;
}

export interface LoggerInput {
  codes: Category;
  loggers: Category;
  /** Geology that stays the same whoever logs: the parent of the code, or the chemistry group. */
  parents: Category;
  holeStarts: Int32Array;
}

/**
 * Code against logger inside each geology. A logger logs whole holes, so the test permutes loggers
 * between holes (each hole under the logger of most of its rows), not rows.
 *
 * @param options.draws Permutations, 999 unless told.
 * @returns Geologies where two codes and two loggers meet, most rows first.
 * @throws {KernelError} `shape`; `bad-parameter`.
 */
export function loggerEffects(
  { codes, loggers, parents, holeStarts }: LoggerInput,
  options: { seed: number; draws?: number; onProgress?: (share: number) => void },
): LoggerEffect[] {
  const n = checkHoleStarts(holeStarts);
  checkCategory(codes, n, 'logging');
  checkCategory(loggers, n, 'logger');
  checkCategory(parents, n, 'parent');
  const { draws = 999 } = options;
  if (!(draws >= 1)) throw new KernelError('bad-parameter', `expected draws >= 1, found ${draws}`);
  return parents.levels
    .flatMap((parent, at) => {
      const inside = {
        ...codes,
        codes: codes.codes.map((code, row) => (parents.codes[row] === at ? code : NOT_LOGGED)),
      };
      const effect = effectInside(inside, loggers, holeStarts, { seed: options.seed + at, draws });
      options.onProgress?.((at + 1) / parents.levels.length);
      return effect ? [{ parent, ...effect }] : [];
    })
    .sort((a, b) => b.n - a.n);
}

function effectInside(
  codes: Category,
  loggers: Category,
  holeStarts: Int32Array,
  { seed, draws }: { seed: number; draws: number },
): Omit<LoggerEffect, 'parent'> | null {
  const byHole = loggerOfHoles(codes, loggers, holeStarts);
  const holes = [...byHole.keys()].filter((hole) => byHole[hole]! >= 0);
  const observed = chiSquareOf(codes, loggers.levels, byHole, holeStarts);
  if (!observed) return null;
  const random = seededRandom(seed);
  const dealt = byHole.slice();
  let reached = 0;
  for (let draw = 0; draw < draws; draw++) {
    for (let i = holes.length - 1; i > 0; i--) {
      const [a, b] = [holes[i]!, holes[random.below(i + 1)]!];
      [dealt[a], dealt[b]] = [dealt[b]!, dealt[a]!];
    }
    const again = chiSquareOf(codes, loggers.levels, dealt, holeStarts)?.chiSquare ?? 0;
    if (again >= observed.chiSquare * (1 - 1e-12)) reached += 1;
  }
  return { ...observed, p: (1 + reached) / (draws + 1), holes: holes.length };
}

/** Logger of most rows of each hole that are looked at; -1 for holes without. */
function loggerOfHoles(codes: Category, loggers: Category, holeStarts: Int32Array): Int32Array {
  return Int32Array.from({ length: holeStarts.length - 1 }, (_, hole) => {
    const rows = new Int32Array(loggers.levels.length);
    for (let row = holeStarts[hole]!; row < holeStarts[hole + 1]!; row++)
      if (codes.codes[row] !== NOT_LOGGED && loggers.codes[row] !== NOT_LOGGED)
        rows[loggers.codes[row]!]! += 1;
    const most = rows.reduce(
      (best, count, logger) => (count > (rows[best] ?? 0) ? logger : best),
      0,
    );
    return (rows[most] ?? 0) > 0 ? most : -1;
  });
}

function chiSquareOf(
  codes: Category,
  levels: readonly string[],
  byHole: Int32Array,
  holeStarts: Int32Array,
) {
  const logger = new Int32Array(codes.codes.length);
  byHole.forEach((own, hole) => logger.fill(own, holeStarts[hole], holeStarts[hole + 1]));
  const table = crossTabulate(codes, { levels, codes: logger }, new Float64Array(logger.length));
  const nCols = table.colLevels.length;
  const test = nCols > 0 ? chiSquareTest(table.counts, nCols) : null;
  if (!test) return null;
  return {
    n: test.n,
    chiSquare: test.chiSquare,
    v: association(table.counts, nCols)?.cramersVCorrected ?? null,
  };
}
