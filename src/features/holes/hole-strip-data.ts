import type { GradeUnit } from '#contract/deposits.ts';
import type { HoleDetail, LoggedInterval } from '#contract/holes.ts';
import { QUALIFIER } from '#contract/tables.ts';
import type { CoreInterval, CoreStructure } from '#src/components/charts/core-types.ts';
import { gradeIn } from '#src/lib/format.ts';

const UNSURE = /poor|low|doubt|unsure|uncertain|bad|not stated/i;

/** Readings for the strip; a confidence that names doubt is drawn as unsure. */
export const stripStructures = ({ structures }: Pick<HoleDetail, 'structures'>): CoreStructure[] =>
  structures.map(({ depthM, alpha, confidence }) => ({ depthM, alphaDeg: alpha, sure: !UNSURE.test(confidence) }));

/** Assayed intervals for the strip with the grade of one analyte; below its limit the limit is drawn. */
export function stripIntervals({ assays, analytes }: Pick<HoleDetail, 'assays' | 'analytes'>, analyte: string, unit: GradeUnit): CoreInterval[] {
  const column = analytes.indexOf(analyte);
  return assays.map(({ row, fromM, toM, ppm, marks }) => {
    const value = ppm[column];
    const mark = marks[column];
    const isThere = value !== null && value !== undefined && mark !== QUALIFIER.missing && mark !== QUALIFIER.notAnalysed;
    return { row, fromM, toM, groupSlot: null, membership: null, grade: isThere ? gradeIn(value, unit) : null, domain: null };
  });
}

/** Weathering codes from the ground down: weathering eases with depth (common practice). */
export function weatheringOrder(weathering: readonly LoggedInterval[]): string[] {
  const sums = new Map<string, { metres: number; moment: number }>();
  for (const { code, fromM, toM } of weathering) {
    const sum = sums.get(code) ?? { metres: 0, moment: 0 };
    const metres = toM - fromM;
    sums.set(code, { metres: sum.metres + metres, moment: sum.moment + (metres * (fromM + toM)) / 2 });
  }
  const middle = ({ metres, moment }: { metres: number; moment: number }): number => moment / metres;
  return [...sums].sort((a, b) => middle(a[1]) - middle(b[1])).map(([code]) => code);
}
