import { KernelError } from '#kernels/kernel-error.ts';
import { ELEMENT_BY_SYMBOL } from '#kernels/units/atomic-weights.ts';

/**
 * What must stand beside every mineral proxy: shown with the numbers, wherever they are shown.
 */
export const MINERAL_CAUTION =
  'Mineral amounts are calculated from assays by ideal formulas, not measured. They are screening only: confirm them by mineralogy before they decide on a plant, a waste dump or a contract. They support, and do not replace, the judgement of a qualified (competent) person.';

/** A mineral of ideal composition. */
export interface Mineral {
  name: string;
  formula: string;
  /** Molar mass, g/mol. */
  molarMass: number;
  /** Mass fraction of each element, 0..1; all elements sum to 1. */
  massFractions: ReadonlyMap<string, number>;
}

const FORMULAS = [
  ['pyrite', 'FeS2'],
  ['pyrrhotite', 'Fe7S8'],
  ['chalcopyrite', 'CuFeS2'],
  ['bornite', 'Cu5FeS4'],
  ['chalcocite', 'Cu2S'],
  ['covellite', 'CuS'],
  ['enargite', 'Cu3AsS4'],
  ['arsenopyrite', 'FeAsS'],
  ['sphalerite', 'ZnS'],
  ['galena', 'PbS'],
  ['molybdenite', 'MoS2'],
  ['stibnite', 'Sb2S3'],
  ['calcite', 'CaCO3'],
  ['dolomite', 'CaMg(CO3)2'],
  ['siderite', 'FeCO3'],
  ['ankerite', 'CaFe(CO3)2'],
  ['magnesite', 'MgCO3'],
  ['quartz', 'SiO2'],
  ['muscovite', 'KAl3Si3O10(OH)2'],
  ['paragonite', 'NaAl3Si3O10(OH)2'],
  ['K-feldspar', 'KAlSi3O8'],
  ['albite', 'NaAlSi3O8'],
  ['anorthite', 'CaAl2Si2O8'],
  ['phlogopite', 'KMg3AlSi3O10(OH)2'],
  ['annite', 'KFe3AlSi3O10(OH)2'],
  ['clinochlore', 'Mg5Al2Si3O10(OH)8'],
  ['chamosite', 'Fe5Al2Si3O10(OH)8'],
  ['kaolinite', 'Al2Si2O5(OH)4'],
  ['pyrophyllite', 'Al2Si4O10(OH)2'],
  ['gypsum', 'CaSO4(H2O)2'],
  ['anhydrite', 'CaSO4'],
  ['barite', 'BaSO4'],
  ['alunite', 'KAl3(SO4)2(OH)6'],
  ['jarosite', 'KFe3(SO4)2(OH)6'],
  ['magnetite', 'Fe3O4'],
  ['hematite', 'Fe2O3'],
  ['rutile', 'TiO2'],
  ['fluorapatite', 'Ca5(PO4)3F'],
  ['fluorite', 'CaF2'],
  ['zircon', 'ZrSiO4'],
  ['chromite', 'FeCr2O4'],
  ['cassiterite', 'SnO2'],
] as const;

export type MineralName = (typeof FORMULAS)[number][0];

/** Atoms of each element in a formula unit. */
export type Atoms = ReadonlyMap<string, number>;

/**
 * Atoms in a chemical formula of symbols, whole numbers and parentheses (`KAl3Si3O10(OH)2`).
 *
 * @throws {KernelError} `bad-parameter` at anything else, or an element that is not known.
 */
export function atomsOf(formula: string): Atoms {
  const levels = [new Map<string, number>()];
  const add = (atoms: Map<string, number>, symbol: string, count: number) =>
    atoms.set(symbol, (atoms.get(symbol) ?? 0) + count);
  let read = 0;
  for (const [token, symbol, , closed] of formula.matchAll(
    /([A-Z][a-z]?)(\d*)|\((?=\w)|\)(\d*)/g,
  )) {
    read += token.length;
    const count = Number(/\d+$/.exec(token)?.[0] ?? 1);
    if (token === '(') levels.push(new Map());
    else if (symbol !== undefined) {
      if (!ELEMENT_BY_SYMBOL.has(symbol)) throw badFormula(formula);
      add(levels[levels.length - 1]!, symbol, count);
    } else if (closed !== undefined) {
      const inner = levels.pop();
      const outer = levels[levels.length - 1];
      if (!inner || !outer) throw badFormula(formula);
      for (const [element, atoms] of inner) add(outer, element, atoms * count);
    }
  }
  const atoms = levels[0];
  const isWhole = read === formula.length && levels.length === 1;
  if (!atoms || !isWhole || atoms.size === 0) throw badFormula(formula);
  return atoms;
}

function badFormula(formula: string): KernelError {
  return new KernelError('bad-parameter', `expected a formula such as CuFeS2, found ${formula}`);
}

/**
 * A mineral of a given formula.
 *
 * @throws {KernelError} `bad-parameter` at a formula that cannot be read.
 */
export function mineralOf(name: string, formula: string): Mineral {
  const masses = [...atomsOf(formula)].map(
    ([symbol, atoms]) => [symbol, atoms * (ELEMENT_BY_SYMBOL.get(symbol)?.weight ?? NaN)] as const,
  );
  const molarMass = masses.reduce((sum, [, mass]) => sum + mass, 0);
  const massFractions = new Map(masses.map(([symbol, mass]) => [symbol, mass / molarMass]));
  return { name, formula, molarMass, massFractions };
}

/**
 * Minerals of ideal composition by name; their constants follow from the frozen atomic weights.
 * Screening only: see {@link MINERAL_CAUTION}.
 */
export const MINERALS: ReadonlyMap<string, Mineral> = new Map(
  FORMULAS.map(([name, formula]) => [name, mineralOf(name, formula)]),
);

/**
 * Mass fraction of an element in a mineral of the table; 0 when it holds none.
 *
 * @throws {KernelError} `bad-parameter` for a mineral the table does not hold.
 */
export function massFraction(mineral: string, element: string): number {
  const found = MINERALS.get(mineral);
  if (!found) {
    throw new KernelError('bad-parameter', `expected a mineral such as pyrite, found ${mineral}`);
  }
  return found.massFractions.get(element) ?? 0;
}
