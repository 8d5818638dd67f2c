import { KernelError } from '#kernels/kernel-error.ts';
import { ELEMENT_BY_SYMBOL } from './atomic-weights.ts';

/** An oxide E_m O_n as laboratories report it. */
export interface Oxide {
  /** Formula as written, `Al2O3`. */
  formula: string;
  element: string;
  /** m, atoms of the element in the formula. */
  atoms: number;
  /** n, atoms of oxygen in the formula. */
  oxygens: number;
  /** Mass of oxide per mass of element; divide an oxide grade by it to get the element. */
  factor: number;
}

const FORMULAS: readonly (readonly [element: string, atoms: number, oxygens: number])[] = [
  ['Al', 2, 3],
  ['B', 2, 3],
  ['Ba', 1, 1],
  ['Be', 1, 1],
  ['C', 1, 2],
  ['Ca', 1, 1],
  ['Ce', 1, 2],
  ['Co', 1, 1],
  ['Cr', 2, 3],
  ['Cs', 2, 1],
  ['Cu', 1, 1],
  ['Fe', 1, 1],
  ['Fe', 2, 3],
  ['Hf', 1, 2],
  ['K', 2, 1],
  ['La', 2, 3],
  ['Li', 2, 1],
  ['Mg', 1, 1],
  ['Mn', 1, 1],
  ['Mo', 1, 3],
  ['Na', 2, 1],
  ['Nb', 2, 5],
  ['Nd', 2, 3],
  ['Ni', 1, 1],
  ['P', 2, 5],
  ['Pb', 1, 1],
  ['Rb', 2, 1],
  ['S', 1, 3],
  ['Sc', 2, 3],
  ['Si', 1, 2],
  ['Sn', 1, 2],
  ['Sr', 1, 1],
  ['Ta', 2, 5],
  ['Th', 1, 2],
  ['Ti', 1, 2],
  ['U', 3, 8],
  ['V', 2, 5],
  ['W', 1, 3],
  ['Y', 2, 3],
  ['Zn', 1, 1],
  ['Zr', 1, 2],
];

const count = (n: number): string => (n === 1 ? '' : String(n));

/** Oxides by formula. */
export const OXIDE_BY_FORMULA: ReadonlyMap<string, Oxide> = new Map(
  FORMULAS.map(([element, atoms, oxygens]) => {
    const formula = `${element}${count(atoms)}O${count(oxygens)}`;
    const factor = stoichiometricFactor(element, atoms, oxygens);
    return [formula, { formula, element, atoms, oxygens, factor }];
  }),
);

/** Oxides by formula in lower case: headers are often all upper or all lower case. */
export const OXIDE_BY_LOWER_CASE: ReadonlyMap<string, Oxide> = new Map(
  [...OXIDE_BY_FORMULA.values()].map((oxide) => [oxide.formula.toLowerCase(), oxide]),
);

/** f = (m A_E + n A_O) / (m A_E). */
function stoichiometricFactor(element: string, atoms: number, oxygens: number): number {
  const metal = atoms * (ELEMENT_BY_SYMBOL.get(element)?.weight ?? NaN);
  return (metal + oxygens * (ELEMENT_BY_SYMBOL.get('O')?.weight ?? NaN)) / metal;
}

/**
 * Grade of the element held by an oxide grade, in the same unit.
 *
 * @param formula Oxide formula, `Al2O3`.
 * @param grade Grade of the oxide in any mass unit; NaN where missing stays NaN.
 * @throws {KernelError} `bad-parameter` for an oxide the table does not hold; `not-finite` for an
 *   infinite grade.
 */
export function elementFromOxide(formula: string, grade: number): number {
  if (Math.abs(grade) === Infinity)
    throw new KernelError('not-finite', `expected a grade of ${formula}, found ${grade}`);
  return grade / oxideFactor(formula);
}

/**
 * Mass of oxide per mass of element.
 *
 * @throws {KernelError} `bad-parameter` for an oxide the table does not hold.
 */
export function oxideFactor(formula: string): number {
  const oxide = OXIDE_BY_FORMULA.get(formula);
  if (!oxide) {
    throw new KernelError('bad-parameter', `expected an oxide such as Al2O3, found ${formula}`);
  }
  return oxide.factor;
}
