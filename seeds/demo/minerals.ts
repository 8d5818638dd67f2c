import type { AnalyteSymbol, Traces } from './analytes.ts';

/**
 * Standard atomic weights 2021, conventional values where an interval is given.
 * @see Prohaska et al. (2022), Standard atomic weights of the elements 2021 (IUPAC Technical Report).
 */
// prettier-ignore
const ATOMIC_WEIGHTS = {
  H: 1.008, C: 12.011, O: 15.999, F: 18.998403162, Na: 22.98976928, Mg: 24.305, Al: 26.9815384,
  Si: 28.085, P: 30.973761998, S: 32.06, K: 39.0983, Ca: 40.078, Ti: 47.867, Fe: 55.845, Cu: 63.546,
  Zn: 65.38, Zr: 91.224, Ba: 137.327, Pb: 207.2,
} as const;

type Atom = keyof typeof ATOMIC_WEIGHTS;
type Formula = Partial<Record<Atom, number>>;

/** Ideal end-member formulas; iron-bearing diopside is half hedenbergite. */
const FORMULAS = {
  quartz: { Si: 1, O: 2 },
  albite: { Na: 1, Al: 1, Si: 3, O: 8 },
  anorthite: { Ca: 1, Al: 2, Si: 2, O: 8 },
  'K-feldspar': { K: 1, Al: 1, Si: 3, O: 8 },
  muscovite: { K: 1, Al: 3, Si: 3, O: 12, H: 2 },
  clinochlore: { Mg: 5, Al: 2, Si: 3, O: 18, H: 8 },
  chamosite: { Fe: 5, Al: 2, Si: 3, O: 18, H: 8 },
  actinolite: { Ca: 2, Mg: 3, Fe: 2, Si: 8, O: 24, H: 2 },
  diopside: { Ca: 2, Mg: 1, Fe: 1, Si: 4, O: 12 },
  epidote: { Ca: 2, Al: 2, Fe: 1, Si: 3, O: 13, H: 1 },
  calcite: { Ca: 1, C: 1, O: 3 },
  dolomite: { Ca: 1, Mg: 1, C: 2, O: 6 },
  kaolinite: { Al: 2, Si: 2, O: 9, H: 4 },
  goethite: { Fe: 1, O: 2, H: 1 },
  magnetite: { Fe: 3, O: 4 },
  ilmenite: { Fe: 1, Ti: 1, O: 3 },
  rutile: { Ti: 1, O: 2 },
  apatite: { Ca: 5, P: 3, O: 12, F: 1 },
  zircon: { Zr: 1, Si: 1, O: 4 },
  barite: { Ba: 1, S: 1, O: 4 },
  pyrite: { Fe: 1, S: 2 },
  chalcopyrite: { Cu: 1, Fe: 1, S: 2 },
  sphalerite: { Zn: 1, S: 1 },
  galena: { Pb: 1, S: 1 },
} as const satisfies Record<string, Formula>;

export type Mineral = keyof typeof FORMULAS;
// prettier-ignore
export const MINERALS: readonly Mineral[] = [
  'quartz', 'albite', 'anorthite', 'K-feldspar', 'muscovite', 'clinochlore', 'chamosite', 'actinolite',
  'diopside', 'epidote', 'calcite', 'dolomite', 'kaolinite', 'goethite', 'magnetite', 'ilmenite',
  'rutile', 'apatite', 'zircon', 'barite', 'pyrite', 'chalcopyrite', 'sphalerite', 'galena',
];

// prettier-ignore
const ATOMS: readonly Atom[] = [
  'H', 'C', 'O', 'F', 'Na', 'Mg', 'Al', 'Si', 'P', 'S', 'K', 'Ca', 'Ti', 'Fe', 'Cu', 'Zn', 'Zr', 'Ba', 'Pb',
];
// prettier-ignore
const ASSAYED_ATOMS = [
  'Na', 'Mg', 'Al', 'P', 'S', 'K', 'Ca', 'Ti', 'Fe', 'Cu', 'Zn', 'Zr', 'Ba', 'Pb',
] as const satisfies readonly (Atom & AnalyteSymbol)[];

/** Mass fraction (0 to 1) of each assayed element in the pure mineral; Si, O, C, H and F are not assayed. */
export function massFractions(mineral: Mineral): Traces {
  const formula: Formula = FORMULAS[mineral];
  const weight = (atom: Atom): number => (formula[atom] ?? 0) * ATOMIC_WEIGHTS[atom];
  const total = ATOMS.reduce((sum, atom) => sum + weight(atom), 0);
  const fractions: Traces = {};
  for (const atom of ASSAYED_ATOMS) if (weight(atom) > 0) fractions[atom] = weight(atom) / total;
  return fractions;
}
