import { KernelError } from '#kernels/kernel-error.ts';
import { massFraction, type MineralName } from './minerals.ts';

/** Elements in mass %; null where not assayed. */
export type ElementPercents = Readonly<Partial<Record<string, number | null>>>;

/** Copper minerals the copper may be shared out to, and their shares of the copper, sum 1. */
export type CopperShares = Readonly<
  Partial<Record<'chalcopyrite' | 'bornite' | 'chalcocite' | 'covellite', number>>
>;

export interface ProxyOptions {
  /** All copper as chalcopyrite unless a species ratio is known. */
  copper?: CopperShares;
  /** Whether Ba is a total assay: four-acid digestion does not open barite. */
  isBariumTotal?: boolean;
  /** Measured sulphate sulphur, mass %; removed first. */
  sulphateSulphur?: number | null;
}

/** Minerals by sequential stoichiometry, mass %. Screening only: see MINERAL_CAUTION. */
export interface SulphideProxies {
  minerals: ReadonlyMap<MineralName, number>;
  /** Sulphur left for pyrite after all other minerals; below 0 where they ask for more than there is. */
  sulphurLeft: number;
  /** Sulphur the other minerals lack: secondary copper sulphides or copper oxides. */
  sulphurDeficit: number;
  /** Sulphur that finds no iron: sulphate or other. */
  sulphurUnplaced: number;
  /** Iron in the minerals. */
  ironUsed: number;
  notes: string[];
}

/**
 * Sulphide minerals from assays, one element after the other: sulphate first, then molybdenite,
 * galena, sphalerite, arsenopyrite, copper sulphides, barite (only with a total Ba), and pyrite from
 * the sulphur left, capped by the iron left.
 *
 * @param percents Mass % of S, and of Cu, As, Zn, Pb, Mo, Fe, Ba where assayed.
 * @returns Null when sulphur is not assayed. Proxies have no use in the oxide zone: mask them there.
 * @throws {KernelError} `bad-parameter` at a negative or infinite grade, or shares that do not sum to 1.
 * @see Stoichiometry; common practice of geometallurgy.
 */
export function sulphideProxies(
  percents: ElementPercents,
  options: ProxyOptions = {},
): SulphideProxies | null {
  const { copper = { chalcopyrite: 1 }, isBariumTotal = false, sulphateSulphur = null } = options;
  const grade = (element: string): number | null =>
    checkedGrade(element, percents[element] ?? null);
  const sulphur = grade('S');
  const sulphate = checkedGrade('sulphate S', sulphateSulphur) ?? 0;
  checkShares(copper);
  if (sulphur === null) return null;
  const steps: [MineralName, string, number | null][] = [
    ['molybdenite', 'Mo', grade('Mo')],
    ['galena', 'Pb', grade('Pb')],
    ['sphalerite', 'Zn', grade('Zn')],
    ['arsenopyrite', 'As', grade('As')],
    ...copperSteps(copper, grade('Cu')),
    ...(isBariumTotal && sulphate === 0
      ? [['barite', 'Ba', grade('Ba')] satisfies [MineralName, string, number | null]]
      : []),
  ];
  const minerals = new Map<MineralName, number>();
  let left = sulphur - sulphate;
  let ironUsed = 0;
  for (const [mineral, element, percent] of steps) {
    if (percent === null) continue;
    const amount = percent / massFraction(mineral, element);
    minerals.set(mineral, amount);
    left -= amount * massFraction(mineral, 'S');
    ironUsed += amount * massFraction(mineral, 'Fe');
  }
  return withPyrite(minerals, left, ironUsed, grade('Fe'));
}

function copperSteps(
  shares: CopperShares,
  copper: number | null,
): [MineralName, string, number | null][] {
  const names = ['chalcopyrite', 'bornite', 'chalcocite', 'covellite'] as const;
  return names
    .filter((name) => (shares[name] ?? 0) > 0)
    .map((name) => [name, 'Cu', copper === null ? null : copper * (shares[name] ?? 0)]);
}

function withPyrite(
  minerals: Map<MineralName, number>,
  sulphurLeft: number,
  ironBefore: number,
  iron: number | null,
): SulphideProxies {
  const notes: string[] = [];
  const wanted = Math.max(0, sulphurLeft) / massFraction('pyrite', 'S');
  const ironLeft = iron === null ? Infinity : Math.max(0, iron - ironBefore);
  const pyrite = Math.min(wanted, ironLeft / massFraction('pyrite', 'Fe'));
  minerals.set('pyrite', pyrite);
  if (sulphurLeft < 0) {
    notes.push(
      'too little sulphur: secondary copper sulphides, oxides or carbonates of the metals',
    );
  }
  if (pyrite < wanted) notes.push('too little iron: pyrite is capped, the sulphur left is other');
  if (iron !== null && ironBefore > iron)
    notes.push('the other sulphides ask for more iron than there is');
  return {
    minerals,
    sulphurLeft,
    sulphurDeficit: Math.max(0, -sulphurLeft),
    sulphurUnplaced: (wanted - pyrite) * massFraction('pyrite', 'S'),
    ironUsed: ironBefore + pyrite * massFraction('pyrite', 'Fe'),
    notes,
  };
}

function checkShares(shares: CopperShares): void {
  const values = Object.values(shares);
  const sum = values.reduce((total, share) => total + share, 0);
  if (values.every((share) => share >= 0) && Math.abs(sum - 1) <= 1e-9) return;
  const found = values.join(', ') || 'none';
  throw new KernelError('bad-parameter', `expected shares of copper that sum to 1, found ${found}`);
}

function checkedGrade(element: string, percent: number | null): number | null {
  if (percent === null || (percent >= 0 && percent <= 100)) return percent;
  const message = `expected ${element} in 0..100 %, found ${percent}`;
  throw new KernelError('bad-parameter', message);
}
