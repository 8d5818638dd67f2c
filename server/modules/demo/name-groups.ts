import { FRAME } from '#contract/snapshots.ts';
import type { Grouping } from '#contract/groupings.ts';
import type { Analysis } from '#server/analysis.ts';
import type { MadeDemo } from '#workers/tasks/make-demo.ts';

export interface GroupNaming {
  label: number;
  name: string;
  code: string;
  rationale: string;
}

/** What the demonstration's geologist calls the rock, and why it is one domain. */
const READINGS: Record<string, { name: string; rationale: string }> = {
  HW: { name: 'Hanging-wall andesite', rationale: 'Feldspathic andesite and its mudstone above the sulphide: high Na, Ca and Ti, no sulphide. Host, not ore.' },
  FW: { name: 'Sericitic footwall', rationale: 'Rhyodacite below the sulphide, sodium lost and potassium gained in the sericite envelope; pyrite without copper.' },
  DYK: { name: 'Dolerite dyke', rationale: 'Barren dykes that cut all else: high Mg, Cr and Ni. Kept apart so that they dilute no ore domain.' },
  CST: { name: 'Chlorite stringer', rationale: 'Copper in chlorite below the massive sulphide. Copper is lower in rhyodacite than in chlorite rock: look at its split by lithology.' },
  ZMS: { name: 'Zinc-rich sulphide', rationale: 'Top of the massive sulphide: Zn, Pb, Cd and Ag together.' },
  CMS: { name: 'Copper-rich sulphide', rationale: 'Base of the massive sulphide: Cu, Bi and Co together, zinc stripped.' },
};

const keyOf = (hole: string, fromM: number): string => `${hole} ${fromM.toFixed(2)}`;

/** Domain of most intervals of each group, by what is known of the invented ground. */
export function nameGroups({ store }: Pick<Analysis, 'store'>, grouping: Grouping, demo: Pick<MadeDemo, 'truth'>): GroupNaming[] {
  const truth = new Map(demo.truth.map(({ hole, fromM, domain }) => [keyOf(hole, fromM), domain]));
  const { codes, dictionary } = store.readCategory(grouping.frameTableId, FRAME.hole);
  const from = store.readNumbers(grouping.frameTableId, FRAME.from);
  const labels = store.readNumbers(grouping.tableId, 'group');
  const counts = new Map<number, Map<string, number>>();
  labels.forEach((label, row) => {
    const domain = truth.get(keyOf(dictionary[codes[row] ?? -1] ?? '', from[row] ?? 0));
    if (domain === undefined || Number.isNaN(label)) return;
    const own = counts.get(label) ?? new Map<string, number>();
    own.set(domain, (own.get(domain) ?? 0) + 1);
    counts.set(label, own);
  });
  return grouping.groups.map(({ label }) => {
    const [code] = [...(counts.get(label) ?? [])].sort((a, b) => b[1] - a[1])[0] ?? ['HW'];
    const reading = READINGS[code] ?? { name: code, rationale: 'One rock body of the invented deposit.' };
    return { label, code, ...reading };
  });
}
