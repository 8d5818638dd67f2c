import type { CellDetail, Subset } from '#contract/screens.ts';

/** Leads with a grade that is mixed in a group, since that is what decides on domains. */
export function findingOf(cells: readonly CellDetail[], subsets: readonly Subset[]): string {
  const kinds = new Map(subsets.map(({ key, kind }) => [key, kind]));
  const inGroups = cells.filter(({ subsetKey }) => kinds.get(subsetKey) === 'group');
  const looked = inGroups.length > 0 ? inGroups : cells;
  const judged = looked.filter(({ verdict }) => verdict !== 'too-few');
  if (judged.length === 0) return 'Too few values to judge any population here.';
  const mixed = judged.filter(({ verdict }) => verdict === 'mixed').sort((a, b) => (b.deltaBic ?? 0) - (a.deltaBic ?? 0));
  const where = inGroups.length > 0 ? 'groups' : 'subsets';
  const [first] = mixed;
  if (!first) return `No grade is mixed in the ${where}: ${judged.filter(({ verdict }) => verdict === 'single').length} of ${judged.length} cells hold one population, the others are suspect.`;
  return `${first.variable} in ${first.subsetLabel} is more than one population; ${mixed.length} of ${judged.length} cells of the ${where} are mixed.`;
}
