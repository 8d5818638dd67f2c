import { KernelError } from '#kernels/kernel-error.ts';
import { ELEMENT_BY_SYMBOL } from '#kernels/units/atomic-weights.ts';
import { atomsOf, MINERALS } from './minerals.ts';

/** Place of a rock or mineral on the alkali-alumina diagram: molar Na/Al and K/Al. */
export interface AlkaliPoint {
  naOverAl: number;
  kOverAl: number;
}

/** Molar ratios of one interval. */
export interface MolarRatios extends AlkaliPoint {
  /** (K + Na) / Al. */
  alkaliOverAl: number;
  /** K / (K + Na), the sericite index; null without alkalis. */
  sericiteIndex: number | null;
  /** (2 Ca + Na + K) / Al, feldspar equivalents; null without Ca. */
  feldsparOverAl: number | null;
}

/** Aluminium (mass %) under which the ratios say nothing: veins, carbonate, massive sulphide. */
export const LEAST_ALUMINIUM = 0.5;

/** Minerals shown as nodes; biotite lifts points towards K-feldspar: check with Mg, Fe and Rb. */
export const ALKALI_NODES = [
  'K-feldspar',
  'albite',
  'muscovite',
  'paragonite',
  'phlogopite',
  'annite',
  'anorthite',
  'kaolinite',
  'pyrophyllite',
  'clinochlore',
  'chamosite',
  'alunite',
] as const;

export type AlkaliNode = (typeof ALKALI_NODES)[number];

/**
 * Molar Na/Al and K/Al of a mineral, from its formula.
 *
 * @throws {KernelError} `bad-parameter` for a mineral that is not in the table or has no aluminium.
 */
export function nodeOf(mineral: string): AlkaliPoint {
  const atoms = atomsOf(MINERALS.get(mineral)?.formula ?? mineral);
  const aluminium = atoms.get('Al') ?? 0;
  if (aluminium === 0) {
    const message = `expected a mineral with aluminium, found ${mineral}`;
    throw new KernelError('bad-parameter', message);
  }
  return {
    naOverAl: (atoms.get('Na') ?? 0) / aluminium,
    kOverAl: (atoms.get('K') ?? 0) / aluminium,
  };
}

const molesOf = (element: string, percent: number): number =>
  percent / (ELEMENT_BY_SYMBOL.get(element)?.weight ?? NaN);

/**
 * Molar ratios of the alkali-alumina diagram.
 *
 * @param percents Mass %. Take the calcium of carbonate off Ca first; null when not assayed.
 * @returns Null where Al is below {@link LEAST_ALUMINIUM}.
 * @throws {KernelError} `bad-parameter` at a grade outside 0..100 %.
 * @see Madeisky & Stanley (1993) and Warren et al. (2007), on molar element ratios (from memory).
 */
export function molarRatios(
  percents: { Al: number; K: number; Na: number; Ca?: number | null },
  leastAluminium = LEAST_ALUMINIUM,
): MolarRatios | null {
  const { Al, K, Na, Ca = null } = percents;
  for (const percent of [Al, K, Na, Ca ?? 0]) {
    if (percent >= 0 && percent <= 100) continue;
    throw new KernelError('bad-parameter', `expected grades in 0..100 %, found ${percent}`);
  }
  if (Al === 0 || Al < leastAluminium) return null;
  const aluminium = molesOf('Al', Al);
  const [k, na] = [molesOf('K', K), molesOf('Na', Na)];
  return {
    naOverAl: na / aluminium,
    kOverAl: k / aluminium,
    alkaliOverAl: (k + na) / aluminium,
    sericiteIndex: k + na > 0 ? k / (k + na) : null,
    feldsparOverAl: Ca === null ? null : (2 * molesOf('Ca', Ca) + k + na) / aluminium,
  };
}
