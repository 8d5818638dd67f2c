import type { Grouping } from '#contract/groupings.ts';
import type { Analysis } from '#server/analysis.ts';
import type { Actor } from '#server/lib/actor.ts';
import type { MadeDemo } from '#workers/tasks/make-demo.ts';
import { made } from './load-demo.ts';
import { nameGroups, type GroupNaming } from './name-groups.ts';

/** Groups that the demonstration's rock falls into. */
const K = 6;
const SEED = 1;
const SCREENED = ['Cu', 'Zn', 'Pb', 'Ag', 'As', 'Bi', 'Sb'];
/** Limits a concentrate buyer of this invented deposit would ask about; values are made up. */
const ZONE_RULES = {
  limits: [
    { analyte: 'As', limit: 300, unit: 'ppm' as const },
    { analyte: 'Sb', limit: 40, unit: 'ppm' as const },
    { analyte: 'Hg', limit: 2, unit: 'ppm' as const },
  ],
  minLengthM: 4,
  maxDilutionM: 3,
};

async function groups(analysis: Analysis, depositId: number, demo: MadeDemo, actor: Actor): Promise<{ grouping: Grouping; naming: GroupNaming[] }> {
  const { components, groupings, suites } = analysis;
  const suite = await suites.create(depositId, {
    name: 'Lithology and alteration', note: 'Well-measured four-acid analytes; those mostly below detection in campaign 1 are left out.', support: 'drill', analytes: demo.suiteAnalytes, replacementFraction: 0.65,
  }, actor);
  const runId = await made(analysis, components.start(depositId, { suiteId: suite.id, seed: SEED }, actor));
  const { suggested } = await components.get(depositId, runId);
  await made(analysis, groupings.startSweep(depositId, { componentRunId: runId, components: suggested, kFrom: 2, kTo: 12, seed: SEED }, actor));
  const groupingId = await made(analysis, groupings.start(depositId, { componentRunId: runId, components: suggested, k: K, seed: SEED, name: 'Six groups' }, actor));
  const naming = nameGroups(analysis, await groupings.get(depositId, groupingId), demo);
  for (const { label, name } of naming) await groupings.updateGroup(depositId, groupingId, label, { name }, 1, actor);
  return { grouping: await groupings.get(depositId, groupingId), naming };
}

/** Groups of one code become one domain: the demonstration geologist's first reading, on purpose not perfect. */
async function acceptDomains(analysis: Analysis, depositId: number, naming: readonly GroupNaming[], actor: Actor): Promise<void> {
  for (const code of new Set(naming.map((group) => group.code))) {
    const own = naming.filter((group) => group.code === code);
    const [first] = own;
    if (!first) continue;
    await analysis.domains.create(depositId, { code, name: first.name, rationale: first.rationale, slot: first.label, groupLabels: own.map(({ label }) => label) }, actor);
  }
  await made(analysis, analysis.domains.gatherEvidence(depositId, [], actor));
}

/** A finished first pass, so that every page has something to look at. */
export async function firstPass(analysis: Analysis, depositId: number, demo: MadeDemo, actor: Actor, say: (line: string) => void): Promise<void> {
  say('components, sweep and groups');
  const { grouping, naming } = await groups(analysis, depositId, demo, actor);
  say('population screens');
  await made(analysis, analysis.screens.start(depositId, { support: 'drill', variables: SCREENED, groupingId: grouping.id, subsets: ['group', 'lithology', 'weathering'] }, actor));
  say('candidate domains and their evidence');
  await acceptDomains(analysis, depositId, naming, actor);
  say('deleterious zones and codes');
  await analysis.geomet.saveRules(depositId, ZONE_RULES, 0, actor);
  await made(analysis, analysis.geomet.start(depositId, actor));
  await made(analysis, analysis.codes.make(depositId, actor));
}
