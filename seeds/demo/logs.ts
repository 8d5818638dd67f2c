import type { TextTable } from './assay-files.ts';
import type { RockUnit, Setting, Weathering } from './geology-model.ts';
import { runsOf } from './hole-geology.ts';
import type { HoleGeology, Run } from './hole-geology.ts';
import type { Campaign } from './holes.ts';
import { roundTo } from './noise.ts';
import type { Noise } from './noise.ts';

type LoggedRock = RockUnit | 'fault zone';
type Spellings = readonly [string, ...string[]];

const FAULT_ZONE_HALF_M = 0.9;

/** The older campaign had several loggers and no code list; weights by repetition. */
const OLDER_CODES: Record<LoggedRock, Spellings> = {
  cover: ['COV', 'Overburden', 'SOIL'],
  andesite: ['AND', 'AND', 'AND', 'andesite', 'Andes', 'ANDS'],
  mudstone: ['MST', 'mudst', 'Mudstone'],
  'zinc sulphide': ['MSU', 'MSU', 'Massive sulphide', 'MASS SULPH'],
  'copper sulphide': ['MSU', 'MSU', 'Massive sulphide', 'MASS SULPH'],
  'chlorite stringer': ['CHL', 'CHL', 'Chl schist', 'CHLSCH', 'RHY'],
  'sericitic rhyodacite': ['RHY', 'RHY', 'SER', 'Rhyodacite'],
  rhyodacite: ['RHY', 'RHY', 'Rhyodacite', 'RD'],
  dolerite: ['DOL', 'DOL', 'dolerite', 'Mafic dyke', 'AND'],
  'fault zone': ['FLT', 'Fault', 'FZ'],
};

const NEWER_CODES: Record<LoggedRock, string> = {
  cover: 'COV',
  andesite: 'AND',
  mudstone: 'MST',
  'zinc sulphide': 'MSZ',
  'copper sulphide': 'MSC',
  'chlorite stringer': 'CHS',
  'sericitic rhyodacite': 'RDS',
  rhyodacite: 'RDC',
  dolerite: 'DOL',
  'fault zone': 'FLT',
};

const REMARKS: Spellings = ['', '', '', '', 'broken core', 'veined', 'contact sheared', 'rubble'];

const rockAt = (setting: Setting): LoggedRock =>
  Math.min(setting.earlyFaultM, setting.lateFaultM) < FAULT_ZONE_HALF_M
    ? 'fault zone'
    : setting.unit;

/** Runs too thin for this logger join the run above. */
function withoutThin<Label>(runs: readonly Run<Label>[], thinnestM: number): Run<Label>[] {
  const kept: Run<Label>[] = [];
  for (const run of runs) {
    const last = kept.at(-1);
    if (last && (last.label === run.label || run.toM - run.fromM < thinnestM)) last.toM = run.toM;
    else kept.push({ ...run });
  }
  return kept;
}

/** Contacts where the logger put them: never past a neighbour. */
function misplace<Label>(runs: Run<Label>[], campaign: Campaign, noise: Noise): Run<Label>[] {
  runs.forEach((run, i) => {
    const above = runs[i - 1];
    if (!above) return;
    const spread = campaign === 1 ? (noise.chance(0.12) ? 2.6 : 0.6) : 0.12;
    const decimals = campaign === 1 ? 0 : 1;
    const placed = roundTo(run.fromM + spread * noise.normal(), decimals);
    const contact = Math.min(
      roundTo(run.toM - 0.3, 1),
      Math.max(roundTo(above.fromM + 0.3, 1), placed),
    );
    above.toM = contact;
    run.fromM = contact;
  });
  return runs;
}

function codeFor(rock: LoggedRock, campaign: Campaign, noise: Noise): string {
  if (campaign === 1) return noise.pick(OLDER_CODES[rock]);
  return NEWER_CODES[rock === 'sericitic rhyodacite' && noise.chance(0.06) ? 'rhyodacite' : rock];
}

function logRows(geology: HoleGeology, runs: readonly Run<string>[]): string[][] {
  return runs.map(({ fromM, toM, label }) => [
    geology.hole.id,
    fromM.toFixed(1),
    toM.toFixed(1),
    label,
  ]);
}

export function lithologyTable(holes: readonly HoleGeology[], noise: Noise): TextTable {
  const rows = holes.flatMap((geology) => {
    const { campaign } = geology.hole;
    const seen = withoutThin(runsOf(geology, rockAt), campaign === 1 ? 1.8 : 0.4);
    const coded = misplace(seen, campaign, noise).map((run) => ({
      ...run,
      label: codeFor(run.label, campaign, noise),
    }));
    return logRows(geology, withoutThin(coded, 0)).map((row) => [
      ...row,
      String(campaign),
      noise.pick(REMARKS),
    ]);
  });
  return { header: ['hole_id', 'from_m', 'to_m', 'lithology', 'campaign', 'remarks'], rows };
}

const WEATHERING_CODES: Record<Weathering, string> = {
  oxide: 'OX',
  transitional: 'TR',
  fresh: 'FR',
};

export function weatheringTable(holes: readonly HoleGeology[], noise: Noise): TextTable {
  const rows = holes.flatMap((geology) => {
    const seen = withoutThin(
      runsOf(geology, ({ weathering }) => WEATHERING_CODES[weathering]),
      1,
    );
    return logRows(geology, misplace(seen, geology.hole.campaign, noise));
  });
  return { header: ['hole_id', 'from_m', 'to_m', 'weathering'], rows };
}
