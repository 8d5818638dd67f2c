import * as z from 'zod';

const more = (count: number, one: string): string => `${count} ${one}${count === 1 ? '' : 's'} or more`;
const fewer = (count: number, one: string): string => `at most ${count} ${one}${count === 1 ? '' : 's'}`;

/** What a value of some kind is counted in; null for numbers themselves. */
function unitOf(origin: string): string | null {
  if (origin === 'string') return 'character';
  return origin === 'array' || origin === 'set' ? 'entry' : null;
}

const plural = (words: string): string => words.replace('entrys', 'entries');

function tooSmall(origin: string, minimum: number, inclusive: boolean): string {
  const unit = unitOf(origin);
  if (unit === 'character' && minimum === 1) return 'expected some text';
  if (unit !== null) return plural(`expected ${more(minimum, unit)}`);
  return inclusive ? `expected ${minimum} or more` : `expected more than ${minimum}`;
}

function tooBig(origin: string, maximum: number, inclusive: boolean): string {
  const unit = unitOf(origin);
  if (unit !== null) return plural(`expected ${fewer(maximum, unit)}`);
  return inclusive ? `expected ${maximum} or less` : `expected less than ${maximum}`;
}

/** What a schema refuses in our words, where it has none of its own; undefined leaves it to the library. */
export function wordsFor(issue: z.core.$ZodRawIssue): string | undefined {
  if (issue.code === 'too_small') return tooSmall(issue.origin, Number(issue.minimum), issue.inclusive !== false);
  if (issue.code === 'too_big') return tooBig(issue.origin, Number(issue.maximum), issue.inclusive !== false);
  if (issue.code !== 'invalid_type') return undefined;
  if (issue.expected === 'number') return 'expected a number';
  return issue.expected === 'int' ? 'expected a whole number' : undefined;
}

z.config({ customError: wordsFor });
