import type { HoleDetail, HoleRow } from '#contract/holes.ts';
import type { FaultPlane } from '#contract/snapshots.ts';
import { countOf, formatMetres, formatShare } from '#src/lib/format.ts';

/** How many holes there are, how far they are assayed, and which lag behind. */
export function holesFinding(holes: readonly HoleRow[], faults: readonly FaultPlane[]): string {
  if (holes.length === 0) return 'No holes yet.';
  const drilled = holes.reduce((sum, { lengthM }) => sum + lengthM, 0);
  const assayed = holes.reduce((sum, { assayedM }) => sum + assayedM, 0);
  const bare = holes.filter(({ assayedM }) => assayedM === 0).length;
  const cut = faults.length === 0 ? '' : `; ${countOf(faults.length, 'fault')} ${faults.length === 1 ? 'crosses' : 'cross'} the ground`;
  const lag = bare === 0 ? '' : ` ${countOf(bare, 'hole')} ${bare === 1 ? 'has' : 'have'} no assays.`;
  return `${countOf(holes.length, 'hole')} of ${formatMetres(drilled)} in all, ${formatShare(assayed / drilled)} assayed${cut}.${lag}`;
}

/** Metres by code, most first. */
function mostLogged(intervals: HoleDetail['lithology']): { code: string; metres: number } | null {
  const metresOf = new Map<string, number>();
  for (const { code, fromM, toM } of intervals) metresOf.set(code, (metresOf.get(code) ?? 0) + toM - fromM);
  const [first] = [...metresOf].sort((a, b) => b[1] - a[1]);
  return first ? { code: first[0], metres: first[1] } : null;
}

/** What one hole is, in a sentence or two. */
export function holeFinding({ lengthM, assayedM, campaign, lithology, structures }: HoleDetail): string {
  const of = campaign === null || campaign === '' ? '' : `, campaign ${campaign}`;
  const rock = mostLogged(lithology);
  const logged = rock ? `Mostly ${rock.code}, ${formatMetres(rock.metres)} of it` : 'No rock is logged';
  const planes = structures.length === 0 ? 'no structures are measured' : `${countOf(structures.length, 'structure')} measured`;
  return `${formatMetres(lengthM)}${of}, ${formatShare(lengthM > 0 ? assayedM / lengthM : NaN)} assayed. ${logged}; ${planes}.`;
}
