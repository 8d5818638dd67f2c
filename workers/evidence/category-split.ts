import type { CategorySplit } from '#contract/domains.ts';
import { association, strengthInWords } from '#kernels/tables/association.ts';
import type { Category } from '#kernels/tables/category.ts';
import { chiSquareTest } from '#kernels/tables/chi-square.ts';
import { crossTableShiftTest } from '#kernels/tables/cross-table-shift.ts';
import { crossTabulate } from '#kernels/tables/cross-tabulation.ts';

export interface SplitInput {
  /** What is split by: `lithology`, `weathering`, `side of <fault>`. */
  category: string;
  /** Level 0 = in the domain, level 1 = elsewhere. */
  inDomain: Category;
  logged: Category;
  lengthsM: Float64Array;
  /** Null where rows have no order: no permutation p then. */
  holeStarts: Int32Array | null;
  seed: number;
}

/** How a domain's intervals divide by a logged category against all other intervals. Tests count intervals, shares are by metres. */
export function splitByCategory({ category, inDomain, logged, lengthsM, holeStarts, seed }: SplitInput): CategorySplit {
  const table = crossTabulate(inDomain, logged, lengthsM);
  const nCols = table.colLevels.length;
  const own = table.rowLevels.indexOf('domain');
  const other = table.rowLevels.indexOf('elsewhere');
  const notLogged = ownNotLogged(inDomain, logged, lengthsM);
  const metresOf = (row: number, col: number): number => (row < 0 ? 0 : (table.metres[row * nCols + col] ?? 0));
  const total = (row: number): number => table.colLevels.reduce((sum, _, col) => sum + metresOf(row, col), 0);
  const test = own >= 0 && other >= 0 && nCols >= 2 ? chiSquareTest(table.counts, nCols) : null;
  const strength = test ? association(table.counts, nCols) : null;
  const v = strength?.cramersVCorrected ?? strength?.cramersV ?? null;
  const shift = test && holeStarts ? crossTableShiftTest(inDomain, logged, holeStarts, { seed }) : null;
  const levels = table.colLevels.map((level, col) => ({
    level,
    intervals: own < 0 ? 0 : (table.counts[own * nCols + col] ?? 0),
    metres: metresOf(own, col),
    share: total(own) > 0 ? metresOf(own, col) / total(own) : 0,
    shareElsewhere: total(other) > 0 ? metresOf(other, col) / total(other) : 0,
    adjustedResidual: test?.adjustedResiduals[own * nCols + col] ?? null,
  }));
  return {
    category, levels: levels.sort((a, b) => b.metres - a.metres), notLogged, n: table.nUsed, chiSquare: test?.chiSquare ?? null, df: test?.df ?? null,
    nominalP: test?.nominalP ?? null, nominalPWithheld: test?.withheld ?? null, permutationP: shift?.p ?? null,
    cramersV: strength?.cramersV ?? null, cramersVCorrected: strength?.cramersVCorrected ?? null, strength: v === null ? 'not defined' : strengthInWords(v),
    notes: notesOf(test !== null, holeStarts !== null, nCols),
  };
}

function ownNotLogged(inDomain: Category, logged: Category, lengthsM: Float64Array): CategorySplit['notLogged'] {
  const sum = { intervals: 0, metres: 0 };
  logged.codes.forEach((code, row) => {
    if (code >= 0 || inDomain.levels[inDomain.codes[row] ?? -1] !== 'domain') return;
    sum.intervals += 1;
    sum.metres += lengthsM[row] ?? 0;
  });
  return sum;
}

function notesOf(isTested: boolean, hasOrder: boolean, levels: number): string[] {
  if (levels === 0) return ['Nothing is logged for this category.'];
  if (!isTested) return ['One level only: there is nothing to test.'];
  const notes = ['Neighbouring intervals are alike, so the p of the chi-square is nominal.'];
  if (!hasOrder) notes.push('Surface samples have no down-hole order: no permutation p.');
  return notes;
}
