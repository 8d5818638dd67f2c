import type { AssayUnit } from './assay-unit.ts';
import { readNumber } from './number-text.ts';

/** Major elements: reported in per cent about as often as in ppm. */
const MAJOR = new Set(['Al', 'Ca', 'Fe', 'K', 'Mg', 'Na', 'S', 'Ti']);

/** Numbers among sample cells, written with either decimal mark; limits count by their size. */
export function sampleNumbers(samples: readonly string[]): { text: string; value: number }[] {
  return samples.flatMap((sample) => {
    const text = sample.trim().replace(/^[<>]=?\s*/, '');
    const value = readNumber(text, '.') ?? readNumber(text, ',');
    return value === null ? [] : [{ text, value }];
  });
}

/**
 * A unit proposed from the size of the values alone: majors up to 60 with decimals and oxides are
 * per cent, gold with a median under 1 is ppm. Anything else is left to a person.
 */
export function proposeUnit(
  element: string,
  isOxide: boolean,
  numbers: readonly { text: string; value: number }[],
): AssayUnit | null {
  if (numbers.length === 0) return null;
  const sorted = numbers.map(({ value }) => value).sort((a, b) => a - b);
  const largest = sorted[sorted.length - 1] ?? 0;
  const withDecimals = numbers.filter(({ text }) => /[.,]\d{2,}$/.test(text)).length;
  const manyDecimals = withDecimals * 2 >= numbers.length;
  if (isOxide || element === 'LOI') return largest <= 100 && withDecimals > 0 ? '%' : null;
  if (MAJOR.has(element) && largest <= 60 && manyDecimals) return '%';
  const median = sorted[Math.floor(sorted.length / 2)] ?? NaN;
  return element === 'Au' && median < 1 ? 'ppm' : null;
}
