import { GradeUnit, type Grid, type PayAnalyte } from '#contract/deposits.ts';
import type { AnalyteSummary } from '#contract/snapshots.ts';

/** Unit an analyte is shown in: the deposit's own for a pay analyte, else that of its file, else ppm. */
export function shownUnit(analyte: string, payAnalytes: readonly PayAnalyte[], summaries: readonly Pick<AnalyteSummary, 'analyte' | 'originalUnit'>[]): GradeUnit {
  const pay = payAnalytes.find((candidate) => candidate.analyte === analyte);
  if (pay) return pay.unit;
  const written = GradeUnit.safeParse(summaries.find((summary) => summary.analyte === analyte)?.originalUnit);
  return written.success ? written.data : 'ppm';
}

export const gridName = (grid: Grid): string => (grid.kind === 'epsg' ? `EPSG ${grid.code}` : grid.name);
