import { describe, expect, it } from 'vitest';
import { formatDate, formatInstant, formatWhen, isoDate } from '#src/lib/format-dates.ts';

const now = new Date(2026, 10, 30, 16, 20);

describe('formatWhen', () => {
  it.each([
    [new Date(2026, 10, 30, 9, 42), '09:42'],
    [new Date(2026, 10, 29, 23, 59), 'Yesterday'],
    [new Date(2026, 10, 27, 8, 0), '27 Nov'],
    [new Date(2025, 10, 27, 8, 0), '27 Nov 2025'],
  ])('%s is %s', (date, words) => {
    expect(formatWhen(date, now)).toBe(words);
  });
});

it('writes days and instants in words', () => {
  expect(formatDate(now)).toBe('30 Nov 2026');
  expect(formatInstant(now)).toBe('30 Nov 2026, 16:20');
  expect(formatDate('nonsense')).toBe('–');
});

it('writes ISO 8601 days for files', () => {
  expect(isoDate(new Date('2026-11-30T23:00:00Z'))).toBe('2026-11-30');
});
