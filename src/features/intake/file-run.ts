import type { FileCheck } from '#contract/files.ts';

export interface RunMark {
  /** Shares of the whole run. */
  start: number;
  width: number;
  severity: FileCheck['marks'][number]['severity'];
  label: string;
}

export interface RunTick {
  at: number;
  label: string | null;
}

const STEPS = [1, 2, 5];
const MOST_LABELS = 8;

/** Rows between labels: 1, 2, 5 × 10^n, no more than eight labels. */
function labelStep(rows: number): number {
  for (let power = 1; ; power *= 10) {
    for (const step of STEPS) if (rows / (step * power) <= MOST_LABELS) return step * power;
  }
}

/** Ticks of a file drawn as one run; row 1 is the header. */
export function runTicks(rows: number): RunTick[] {
  if (rows <= 0) return [];
  const step = labelStep(rows);
  const minor = step < 5 ? step : step / 5;
  return Array.from({ length: Math.floor(rows / minor) + 1 }, (_, index) => {
    const row = index * minor;
    return { at: row / rows, label: row % step === 0 ? String(row) : null };
  });
}

/** Where the marks of a check lie on the run, set-aside rows last so that they are drawn on top. */
export function runMarks({ marks, rows }: Pick<FileCheck, 'marks' | 'rows'>): RunMark[] {
  const lines = rows + 1;
  return marks
    .map(({ fromRow, toRow, severity }) => ({
      start: (fromRow - 1) / lines,
      width: (toRow - fromRow + 1) / lines,
      severity,
      label: `${fromRow === toRow ? `row ${fromRow}` : `rows ${fromRow} to ${toRow}`}: ${severity === 'aside' ? 'set aside' : 'warning'}`,
    }))
    .sort((a, b) => Number(a.severity === 'aside') - Number(b.severity === 'aside'));
}
