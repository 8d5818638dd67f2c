import { KernelError } from '#kernels/kernel-error.ts';
import { ELEMENT_BY_SYMBOL } from './atomic-weights.ts';
import { oxideFactor } from './oxides.ts';

/** A row whose grades cannot all be right. */
export interface RowProblem {
  code: 'over-100-percent' | 'over-stoichiometric-maximum';
  row: number;
  /** Null for the sum of all elements. */
  element: string | null;
  percent: number;
  limitPercent: number;
  message: string;
}

export interface SanityOptions {
  /** Most that all elements as oxides may sum to, mass %. */
  mostPercent?: number;
  /** Elements known to occur native (or Cu as cuprite): their maximum is 100 % (cuprite 88.8 %). */
  nativeElements?: ReadonlySet<string>;
  isCupritePresent?: boolean;
}

/** Half of the last digit that such high grades are written with, mass %. */
const ROUNDING_PERCENT = 0.05;

/**
 * Oxide by which each element is counted: the one with least oxygen where there are two. Metals that
 * mostly sit in sulphides are counted as they are.
 */
const OXIDE_OF: Readonly<Record<string, string>> = {
  Al: 'Al2O3',
  B: 'B2O3',
  Ba: 'BaO',
  Be: 'BeO',
  Ca: 'CaO',
  Ce: 'CeO2',
  Cr: 'Cr2O3',
  Cs: 'Cs2O',
  Fe: 'FeO',
  Hf: 'HfO2',
  K: 'K2O',
  La: 'La2O3',
  Li: 'Li2O',
  Mg: 'MgO',
  Mn: 'MnO',
  Na: 'Na2O',
  Nb: 'Nb2O5',
  Nd: 'Nd2O3',
  P: 'P2O5',
  Rb: 'Rb2O',
  Sc: 'Sc2O3',
  Si: 'SiO2',
  Sn: 'SnO2',
  Sr: 'SrO',
  Ta: 'Ta2O5',
  Th: 'ThO2',
  Ti: 'TiO2',
  U: 'U3O8',
  V: 'V2O5',
  W: 'WO3',
  Y: 'Y2O3',
  Zr: 'ZrO2',
};

const weight = (symbol: string): number => ELEMENT_BY_SYMBOL.get(symbol)?.weight ?? NaN;
const percentIn = (symbol: string, atoms: number, rest: number): number =>
  (100 * atoms * weight(symbol)) / (atoms * weight(symbol) + rest);

/** Most of an element that a common mineral holds, mass %: FeO, FeS2, Cu2S, Cu2O. */
export const MAXIMA = {
  Fe: percentIn('Fe', 1, weight('O')),
  S: percentIn('S', 2, weight('Fe')),
  Cu: percentIn('Cu', 2, weight('S')),
  cuprite: percentIn('Cu', 2, weight('O')),
} as const;

/**
 * Finds rows whose elements sum to more than there can be, or one of which passes what its richest
 * common mineral holds. Elements are counted as oxides (Cu, Co, Mo, Ni, Pb and Zn as they are);
 * each sulphur takes the place of one oxygen, each fluorine and chlorine of half a one, as is usual for
 * rock analyses, so that sulphides and fluorite raise no false alarm. Missing grades count as 0.
 *
 * @param ppm Row-major (nRows, elements), NaN where not assayed. Not modified.
 * @param elements Element symbols; loss on ignition is no part and must be left out.
 * @returns In order of rows; of a row, elements first.
 * @throws {KernelError} `shape`; `bad-parameter` at a symbol that is none or with { row } at a grade
 *   that is negative or infinite.
 */
export function findRowProblems(
  ppm: Float64Array,
  elements: readonly string[],
  options: SanityOptions = {},
): RowProblem[] {
  const {
    mostPercent = 102,
    nativeElements = new Set<string>(),
    isCupritePresent = false,
  } = options;
  const n = elements.length;
  if (n === 0 || ppm.length % n !== 0) {
    throw new KernelError('shape', `${ppm.length} grades do not fill rows of ${n} elements`);
  }
  const factors = elements.map(massPerMass);
  const limits = elements.map((element) =>
    nativeElements.has(element) ? 100 : maximumOf(element, isCupritePresent),
  );
  const problems: RowProblem[] = [];
  for (let row = 0; row < ppm.length / n; row++) {
    let total = 0;
    for (let j = 0; j < n; j++) {
      const grade = ppm[row * n + j]!;
      if (Number.isNaN(grade)) continue;
      if (!(grade >= 0 && grade < Infinity)) {
        const message = `expected ppm >= 0 of ${elements[j]}, found ${grade} in row ${row}`;
        throw new KernelError('bad-parameter', message, { row });
      }
      const percent = grade / 1e4;
      total += percent * factors[j]!;
      if (percent > limits[j]! + ROUNDING_PERCENT)
        problems.push(overMaximum(row, elements[j]!, percent, limits[j]!));
    }
    if (total > mostPercent) problems.push(overTotal(row, total, mostPercent));
  }
  return problems;
}

/** Mass counted per mass of an element. */
function massPerMass(element: string): number {
  if (!ELEMENT_BY_SYMBOL.has(element)) {
    throw new KernelError('bad-parameter', `expected an element symbol, found ${element}`);
  }
  if (element === 'S') return 1 - weight('O') / weight('S');
  if (element === 'F' || element === 'Cl') return 1 - weight('O') / (2 * weight(element));
  const oxide = OXIDE_OF[element];
  return oxide === undefined ? 1 : oxideFactor(oxide);
}

function maximumOf(element: string, isCupritePresent: boolean): number {
  if (element === 'Cu') return isCupritePresent ? MAXIMA.cuprite : MAXIMA.Cu;
  if (element === 'Fe' || element === 'S') return MAXIMA[element];
  return 100;
}

function overMaximum(row: number, element: string, percent: number, limit: number): RowProblem {
  const message = `expected at most ${limit.toFixed(1)} % ${element}, found ${percent.toFixed(2)} % in row ${row}: check its unit`;
  const code = 'over-stoichiometric-maximum';
  return { code, row, element, percent, limitPercent: limit, message };
}

function overTotal(row: number, percent: number, limit: number): RowProblem {
  const message = `expected elements as oxides to sum to at most ${limit} %, found ${percent.toFixed(1)} % in row ${row}: check units`;
  return { code: 'over-100-percent', row, element: null, percent, limitPercent: limit, message };
}
