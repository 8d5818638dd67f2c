import type { RockUnit } from './geology-model.ts';
import { STEP_M, runsOf } from './hole-geology.ts';
import type { HoleGeology } from './hole-geology.ts';
import type { Noise } from './noise.ts';

/** One sampled length, in whole steps of the geology. */
export interface SampleSpan {
  fromStep: number;
  endStep: number;
  /** False where core was lost or never taken: the row reads NS. */
  sampled: boolean;
}

const SHORTEST_STEPS = 5;
const NOMINAL_STEPS: Record<RockUnit, number> = {
  cover: 20,
  andesite: 20,
  mudstone: 10,
  'zinc sulphide': 10,
  'copper sulphide': 10,
  'chlorite stringer': 15,
  'sericitic rhyodacite': 15,
  rhyodacite: 20,
  dolerite: 20,
};

const ORE_UNITS: ReadonlySet<RockUnit> = new Set<RockUnit>([
  'zinc sulphide',
  'copper sulphide',
  'chlorite stringer',
]);

/** Contacts that the sampler saw and cut at: nearly all in ore, fewer elsewhere. */
function honouredContacts(geology: HoleGeology, noise: Noise): number[] {
  const hostCare = geology.hole.campaign === 1 ? 0.6 : 0.85;
  const steps: number[] = [];
  let above: RockUnit | null = null;
  for (const { fromM, label } of runsOf(geology, (setting) => setting.unit)) {
    const ore = ORE_UNITS.has(label) || (above !== null && ORE_UNITS.has(above));
    if (above !== null && noise.chance(ore ? 0.96 : hostCare))
      steps.push(Math.round(fromM / STEP_M));
    above = label;
  }
  return steps;
}

function nextCut(from: number, end: number, nominal: number, contacts: readonly number[]): number {
  const contact = contacts.find((step) => step >= from + SHORTEST_STEPS);
  if (contact !== undefined && contact <= from + nominal + SHORTEST_STEPS - 1) return contact;
  return end - (from + nominal) < SHORTEST_STEPS ? end : from + nominal;
}

/** Samples from the surface to the end of the hole, without gaps. */
export function sampleHole(geology: HoleGeology, noise: Noise): SampleSpan[] {
  const end = geology.settings.length;
  const contacts = honouredContacts(geology, noise);
  const lossRate = geology.hole.campaign === 1 ? 0.006 : 0.002;
  const casing = Math.round(noise.uniform(20, 50));
  const spans: SampleSpan[] = [{ fromStep: 0, endStep: casing, sampled: false }];
  for (let from = casing; from < end;) {
    const unit = geology.settings[from]?.unit ?? 'andesite';
    const endStep = nextCut(from, end, NOMINAL_STEPS[unit], contacts);
    spans.push({ fromStep: from, endStep, sampled: !noise.chance(lossRate) });
    from = endStep;
  }
  return spans;
}
