import type { CategorySplit, DomainEvidence, OrientationSet, PopulationPart } from '#contract/domains.ts';
import type { NetLine } from '#src/components/charts/stereonet-marks.ts';
import { poleOf } from '#kernels/geometry/planes.ts';

/** A category in words: columns of the frame carry the fault in their name. */
export function categoryName(category: string): string {
  if (category === 'lithology') return 'Logged rock';
  if (category === 'weathering') return 'Weathering';
  return category.startsWith('side of ') ? `Side of ${category.slice('side of '.length)}` : category;
}

type Structure = DomainEvidence['structures'][number];
const SURE = new Set(['good', 'high', 'sure']);
const FAIR = new Set(['moderate', 'medium', 'fair']);

/** Poles of the planes of one type, with how sure each reading is. */
export function polesOf(structures: readonly Structure[], structureType: string): NetLine[] {
  return structures.filter((structure) => structure.structureType === structureType).map(({ dip, dipDirection, confidence }) => {
    const { trend, plunge } = poleOf({ dip, dipDirection });
    const word = confidence.toLowerCase();
    return { trend, plunge, sureness: SURE.has(word) ? 'sure' : FAIR.has(word) ? 'moderate' : 'unsure' };
  });
}

/** The set whose mean plane is drawn: the sure ones together where there are enough, else the best there is. */
export function meanSetOf(orientations: readonly OrientationSet[], structureType: string): OrientationSet | null {
  const own = orientations.filter((set) => set.structureType === structureType && set.meanPlane !== null);
  return own.find(({ confidence }) => confidence.includes(' and ')) ?? own[0] ?? null;
}

/** Structure types with most readings first. */
export function typesOf(structures: readonly Structure[]): string[] {
  const counts = new Map<string, number>();
  for (const { structureType } of structures) counts.set(structureType, (counts.get(structureType) ?? 0) + 1);
  return [...counts].sort(([, a], [, b]) => b - a).map(([type]) => type);
}

/** Whole, domain and its parts by one category, for one analyte. */
export function partsBefore(populations: readonly PopulationPart[], variable: string, splitBy: string | null): PopulationPart[] {
  const own = populations.filter((part) => part.variable === variable);
  const parts = own.filter(({ role, splitBy: by }) => role === 'part' && by === splitBy).sort((a, b) => b.n - a.n);
  return [...own.filter(({ role }) => role !== 'part'), ...parts];
}

/** Categories the domain was split by, those that resolve most mixing first. */
export function splitsOf(populations: readonly PopulationPart[], variable: string): string[] {
  const names = new Set(populations.flatMap(({ splitBy, role }) => (role === 'part' && splitBy ? [splitBy] : [])));
  const mixedShare = (name: string): number => {
    const parts = populations.filter((part) => part.variable === variable && part.splitBy === name);
    const total = parts.reduce((sum, { n }) => sum + n, 0);
    const mixed = parts.filter(({ verdict }) => verdict === 'mixed').reduce((sum, { n }) => sum + n, 0);
    return parts.length < 2 || total === 0 ? 2 : mixed / total;
  };
  return [...names].sort((a, b) => mixedShare(a) - mixedShare(b));
}

/** The test of one split in a line: strength, chi-square, p by shifting labels. */
export function testWords({ cramersVCorrected, chiSquare, df, permutationP, nominalP, nominalPWithheld, strength }: CategorySplit): string {
  if (chiSquare === null) return 'one level: nothing to test';
  const v = cramersVCorrected === null ? '–' : cramersVCorrected.toFixed(2);
  const p = permutationP !== null ? `p ${permutationP < 0.002 ? '≤ 0.001' : permutationP.toFixed(3)} by shifts` : nominalP !== null ? `nominal p ${nominalP < 0.001 ? '< 0.001' : nominalP.toFixed(3)}` : (nominalPWithheld ?? 'p withheld');
  return `${strength === 'none' ? 'no' : strength} tie: V ${v}, χ² ${chiSquare.toFixed(0)} (${df ?? '–'} df), ${p}`;
}
