import type { RowProblem } from '#contract/files.ts';
import type { Tone } from '#src/components/ui/chip.tsx';

const CODE_WORDS = new Map([
  ['row-short', 'row too short'],
  ['row-long', 'row too long'],
  ['cell-spans-lines', 'cell of several lines'],
  ['not-a-number', 'text in a number'],
  ['number-missing', 'number missing'],
  ['text-missing', 'text missing'],
  ['hole-unknown', 'unknown hole'],
  ['interval-negative', 'interval above the collar'],
  ['interval-reversed', 'interval reversed'],
  ['interval-overlap', 'intervals overlap'],
  ['interval-repeated', 'interval repeated'],
  ['past-end', 'past the end of hole'],
  ['negative-value', 'negative grade'],
  ['read-as-below', 'read as below limit'],
  ['limit-unknown', 'limit unknown'],
  ['over-the-whole', 'more than the whole'],
  ['points-up', 'station points up'],
  ['unit-doubtful', 'unit in doubt'],
]);

/** A problem's stable code in words. */
export const codeWords = (code: string): string => CODE_WORDS.get(code) ?? code.replaceAll('-', ' ');

export const SEVERITY_WORDS: Record<RowProblem['severity'], string> = { aside: 'set aside', warning: 'warning' };
export const SEVERITY_TONES: Record<RowProblem['severity'], Tone> = { aside: 'bad', warning: 'warn' };
