import { seededRandom } from '#kernels/random.ts';
import { assayTable } from './assay-files.ts';
import { assayHole } from './assays.ts';
import type { AssayInterval } from './assays.ts';
import { csvText } from './csv-text.ts';
import { collarTable, faultTable, soilTable, surveyTable } from './ground-tables.ts';
import type { TruthRow } from './ground-truth.ts';
import { readGeology } from './hole-geology.ts';
import type { HoleGeology } from './hole-geology.ts';
import { drillHoles } from './holes.ts';
import type { Campaign } from './holes.ts';
import { lithologyTable, weatheringTable } from './logs.ts';
import { noiseFrom, wanderFrom } from './noise.ts';
import type { Noise } from './noise.ts';
import { plantAssayProblems, plantOtherProblems } from './planted-problems.ts';
import type { PlantedProblem, PlantingGround } from './planted-problems.ts';
import { structureTable } from './structures.ts';

export type DemoFileKind =
  'collar' | 'survey' | 'assay' | 'lithology' | 'weathering' | 'structure' | 'fault' | 'surface';

export interface DemoFile {
  fileName: string;
  kind: DemoFileKind;
  csv: string;
  mode: 'replace' | 'add';
}

/** A made-up deposit: what a team would load, and what is really in the ground. */
export interface DemoDeposit {
  name: string;
  description: string;
  grid: { kind: 'local'; name: string };
  payAnalytes: { analyte: string; unit: 'ppm' | '%' | 'g/t' | 'ppb' }[];
  deleteriousAnalytes: string[];
  /** In the order they should be loaded. */
  files: DemoFile[];
  /** Every assayed interval that is not a planted problem, once. */
  truth: TruthRow[];
  plantedProblems: PlantedProblem[];
  /** Well-measured analytes recommended for grouping. */
  suiteAnalytes: string[];
}

export const DEMO_SEED = 20260117;

const DESCRIPTION =
  'Invented scenario for practice: no real place, company or person. A volcanic-hosted copper–zinc sulphide lens ' +
  'with a chlorite stringer zone below it, drilled in two campaigns by different methods, cut by dolerite dykes ' +
  'and offset by a late fault.';

const SUITE =
  'Al Ba Ca Cd Ce Co Cr Cu Fe Ga K La Li Mg Mn Na Nb Ni P Pb Rb S Sc Sr Th Ti V Y Zn Zr'.split(' ');

/** One independent stream per subject, so that a change in one table leaves the others alone. */
const stream = (seed: number, subject: number): Noise =>
  noiseFrom(seededRandom(seed * 31 + subject));

function groundOf(
  all: readonly AssayInterval[],
  holes: readonly HoleGeology[],
  campaign: Campaign,
  noise: Noise,
): PlantingGround {
  const ids = new Set(
    holes.filter(({ hole }) => hole.campaign === campaign).map(({ hole }) => hole.id),
  );
  const intervals = all.filter(({ hole }) => ids.has(hole));
  return {
    fileName: `assays_campaign_${campaign}.csv`,
    table: assayTable(intervals, campaign, noise),
    intervals,
  };
}

const intervalKey = ({ hole, fromM }: { hole: string; fromM: number }): string =>
  `${hole}|${fromM}`;

function truthWithout(
  intervals: readonly AssayInterval[],
  problems: readonly PlantedProblem[],
): TruthRow[] {
  const spoilt = new Set(
    problems.flatMap(({ interval }) => (interval ? [intervalKey(interval)] : [])),
  );
  return intervals
    .filter((interval) => interval.grades !== null && !spoilt.has(intervalKey(interval)))
    .map(({ truth }) => truth);
}

/**
 * The demonstration deposit, made from nothing but its seed.
 *
 * @param seed Any integer; the same seed gives the same bytes.
 */
export function makeDemoDeposit(seed: number = DEMO_SEED): DemoDeposit {
  const holes = drillHoles(stream(seed, 1));
  const geology = holes.map(readGeology);
  const intervals = geology.flatMap((one, i) => assayHole(one, seed * 31 + 100 + i));
  const older = groundOf(intervals, geology, 1, stream(seed, 2));
  const newer = groundOf(intervals, geology, 2, stream(seed, 3));
  const survey = surveyTable(holes);
  const lithology = lithologyTable(geology, stream(seed, 4));
  const plantedProblems = [
    ...plantAssayProblems(older, newer),
    ...plantOtherProblems(survey, lithology, holes),
  ];
  const soilNoise = stream(seed, 7);
  const soil = soilTable({
    noise: soilNoise,
    wander: wanderFrom(soilNoise, 0.4),
    holeShift: () => 0,
  });
  const file = (
    fileName: string,
    kind: DemoFileKind,
    csv: string,
    mode: 'replace' | 'add' = 'replace',
  ): DemoFile => ({ fileName, kind, csv, mode });
  return {
    name: 'Varrowmere',
    description: DESCRIPTION,
    grid: { kind: 'local', name: 'Varrowmere local grid' },
    payAnalytes: [
      { analyte: 'Cu', unit: '%' },
      { analyte: 'Zn', unit: '%' },
      { analyte: 'Au', unit: 'g/t' },
      { analyte: 'Ag', unit: 'g/t' },
    ],
    deleteriousAnalytes: ['As', 'Sb', 'Hg', 'Bi', 'Cd'],
    files: [
      file('collar.csv', 'collar', csvText(collarTable(holes))),
      file('survey.csv', 'survey', csvText(survey)),
      file(older.fileName, 'assay', csvText(older.table)),
      file(newer.fileName, 'assay', csvText(newer.table), 'add'),
      file('lithology.csv', 'lithology', csvText(lithology)),
      file('weathering.csv', 'weathering', csvText(weatheringTable(geology, stream(seed, 5)))),
      file('structure.csv', 'structure', csvText(structureTable(geology, stream(seed, 6)))),
      file('faults.csv', 'fault', csvText(faultTable())),
      file('surface_samples.csv', 'surface', csvText(soil)),
    ],
    truth: truthWithout(intervals, plantedProblems),
    plantedProblems,
    suiteAnalytes: [...SUITE],
  };
}
