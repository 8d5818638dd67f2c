import { FOUR_ACID_ANALYTES, PERCENT_ANALYTES } from './analytes.ts';
import type { AnalyteSymbol } from './analytes.ts';
import type { AssayInterval } from './assays.ts';
import type { Campaign } from './holes.ts';
import { ORE_GRADE_ANALYTES, ROUTINE_CAP_PPM, oreGradeCell, routineCell } from './laboratory.ts';
import type { Noise } from './noise.ts';

/** A table on its way to CSV: header and rows of cell texts. */
export interface TextTable {
  header: string[];
  rows: string[][];
}

const COLUMN_ORDER: readonly AnalyteSymbol[] = ['Au', ...FOUR_ACID_ANALYTES, 'Hg'];
const unitOf = (analyte: AnalyteSymbol): string => (PERCENT_ANALYTES.has(analyte) ? 'pct' : 'ppm');

/** Older campaign: `Cu_ppm`, own columns for the ore-grade method. */
function olderHeading(analyte: AnalyteSymbol): string {
  if (analyte === 'Au') return 'Au_ppm_FA';
  return analyte === 'Hg' ? 'Hg_ppm_CV' : `${analyte}_${unitOf(analyte)}`;
}

/** Newer campaign: `Cu ppm four-acid`, one column for the whole range. */
function newerHeading(analyte: AnalyteSymbol): string {
  if (analyte === 'Au') return 'Au g/t fire assay';
  if (analyte === 'Hg') return 'Hg ppm cold vapour';
  return `${analyte} ${PERCENT_ANALYTES.has(analyte) ? '%' : 'ppm'} four-acid`;
}

function headerOf(campaign: Campaign): string[] {
  if (campaign === 2) return ['Hole', 'From', 'To', 'Sample', ...COLUMN_ORDER.map(newerHeading)];
  const oreGrade = ORE_GRADE_ANALYTES.map((analyte) => `${analyte}_OG_pct`);
  return ['hole_id', 'from_m', 'to_m', 'sample_id', ...COLUMN_ORDER.map(olderHeading), ...oreGrade];
}

function cellsOf(interval: AssayInterval, campaign: Campaign, noise: Noise): string[] {
  const { grades } = interval;
  if (!grades) {
    const blanks = campaign === 1 ? ORE_GRADE_ANALYTES.map(() => '') : [];
    return [...COLUMN_ORDER.map(() => 'NS'), ...blanks];
  }
  const texts = new Map<AnalyteSymbol, string>();
  for (const analyte of COLUMN_ORDER) {
    texts.set(analyte, routineCell(grades[analyte], analyte, campaign, noise));
  }
  const cells = [...texts.values()];
  if (campaign === 2) return cells;
  const oreGrade = ORE_GRADE_ANALYTES.map((analyte) =>
    texts.get(analyte) === `>${ROUTINE_CAP_PPM}` ? oreGradeCell(grades[analyte], noise) : '',
  );
  return [...cells, ...oreGrade];
}

/** The assay table of one campaign as its laboratory delivered it. */
export function assayTable(
  intervals: readonly AssayInterval[],
  campaign: Campaign,
  noise: Noise,
): TextTable {
  const rows = intervals.map((interval) => [
    interval.hole,
    interval.fromM.toFixed(1),
    interval.toM.toFixed(1),
    interval.sampleId,
    ...cellsOf(interval, campaign, noise),
  ]);
  return { header: headerOf(campaign), rows };
}
