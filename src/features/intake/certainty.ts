import type { ColumnGuess, ColumnMapping, Upload } from '#contract/files.ts';
import type { Tone } from '#src/components/ui/chip.tsx';

/** How sure the reading of one column is, in a chip and, where it needs one, a line. */
export interface Certainty {
  tone: Tone;
  word: string;
  reason: string | null;
  /** A person should look before the file is loaded. */
  isOpen: boolean;
}

const MAPPED = ['role', 'analyte', 'unit', 'oxide', 'method'] as const;

const isAsGuessed = (column: ColumnMapping, guess: ColumnGuess): boolean => MAPPED.every((key) => column[key] === guess[key]);

/** The column whose values this one fills in for: an analyte's first column stands. */
function standsBehind(column: ColumnMapping, columns: readonly ColumnMapping[]): string | null {
  if (column.role !== 'analyte') return null;
  const first = columns.find(({ role, analyte }) => role === 'analyte' && analyte === column.analyte);
  return first && first.index !== column.index ? first.header : null;
}

/**
 * Reads certainty off the guess, the remembered mapping and what a person has changed since.
 *
 * @param isChecked The whole file has been checked with this mapping: nothing is open any more.
 */
export function certaintyOf(column: ColumnMapping, columns: readonly ColumnMapping[], { guess, mappingRemembered }: Pick<Upload, 'guess' | 'mappingRemembered'>, isChecked: boolean): Certainty {
  const guessed = guess.find(({ index }) => index === column.index);
  const turned = column.oxide ? `${column.oxide}, turned into ${column.analyte ?? 'its element'} on load` : null;
  if (column.role === 'skip') return { tone: 'plain', word: 'not used', reason: skipReason(guessed), isOpen: false };
  const first = standsBehind(column, columns);
  if (first !== null) return { tone: 'note', word: 'fills in', reason: `where ${first} is capped or empty`, isOpen: false };
  if (mappingRemembered) return { tone: 'good', word: 'as loaded before', reason: turned, isOpen: false };
  if (!guessed || !isAsGuessed(column, guessed)) return { tone: 'note', word: 'set by hand', reason: turned, isOpen: false };
  if (guessed.certainty === 'check') return { tone: 'warn', word: 'look', reason: guessed.reason, isOpen: !isChecked };
  return { tone: 'good', word: 'sure', reason: turned, isOpen: false };
}

const skipReason = (guess: ColumnGuess | undefined): string | null =>
  guess && guess.role === 'skip' && guess.certainty !== 'sure' ? guess.reason : null;

/** Columns of an upload a person should look at before it is loaded. */
export const openColumns = (upload: Upload): ColumnMapping[] =>
  upload.mapping.columns.filter((column) => certaintyOf(column, upload.mapping.columns, upload, upload.state !== 'mapped').isOpen);
