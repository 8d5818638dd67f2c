import type { GradeUnit } from '#contract/deposits.ts';
import type { HoleDetail } from '#contract/holes.ts';
import { QUALIFIER } from '#contract/tables.ts';
import type { CellLook } from '#src/components/ui/cell-mark.tsx';
import { formatFigures, gradeIn } from '#src/lib/format.ts';

export type AssayRow = HoleDetail['assays'][number];

export interface AssayCell {
  look: CellLook;
  text: string;
  /** For sorting and files: the value, or the limit with its sign as text. */
  value: string | number | null;
}

/** One grade as the table shows it: below and above a limit with their sign, what is missing as such. */
export function assayCell(row: AssayRow, column: number, unit: GradeUnit): AssayCell {
  const ppm = row.ppm[column];
  const mark = row.marks[column];
  if (mark === QUALIFIER.notAnalysed || mark === undefined) return { look: 'plain', text: '', value: null };
  if (mark === QUALIFIER.missing || ppm === null || ppm === undefined) return { look: 'missing', text: 'none', value: null };
  const shown = gradeIn(ppm, unit);
  const text = formatFigures(shown, 4);
  if (mark === QUALIFIER.below) return { look: 'below', text: `<${text}`, value: `<${shown}` };
  if (mark === QUALIFIER.above) return { look: 'above', text: `>${text}`, value: `>${shown}` };
  return { look: 'plain', text, value: shown };
}
