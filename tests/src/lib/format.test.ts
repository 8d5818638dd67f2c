import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import {
  MINUS,
  MISSING,
  THIN_SPACE,
  countOf,
  formatBytes,
  formatDepth,
  formatFigures,
  formatFixed,
  formatGrade,
  formatHash,
  formatInterval,
  formatMetres,
  formatP,
  formatShare,
  gradeIn,
  gradeToPpm,
  setNumberLocale,
} from '#src/lib/format.ts';

beforeAll(() => setNumberLocale('en-GB'));
afterAll(() => setNumberLocale(undefined));

const s = THIN_SPACE;

describe('figures', () => {
  it.each([
    [2.614, '2.61'],
    [0.53, '0.53'],
    [0.0005321, '0.000532'],
    [51, '51'],
    [1113.6, '1,114'],
    [0, '0'],
    [-7.5, `${MINUS}7.5`],
    [Number.NaN, MISSING],
    [Number.POSITIVE_INFINITY, MISSING],
  ])('%d with three figures is %s', (value, text) => {
    expect(formatFigures(value)).toBe(text);
  });

  it('keeps all decimals where they are asked for', () => {
    expect(formatFixed(2, 2)).toBe('2.00');
    expect(formatFixed(-0.005, 2)).toBe(`${MINUS}0.01`);
  });

  it('UX-11 follows the locale on screen', () => {
    setNumberLocale('de-DE');
    expect(formatFixed(1234.5, 1)).toBe('1.234,5');
    setNumberLocale('en-GB');
    expect(formatFixed(1234.5, 1)).toBe('1,234.5');
  });
});

describe('lengths', () => {
  it.each([
    [7712.4, `7,712${s}m`],
    [72, `72.0${s}m`],
    [0, `0.0${s}m`],
    [Number.NaN, MISSING],
  ])('%d m is %s', (metres, text) => {
    expect(formatMetres(metres)).toBe(text);
  });

  it('writes a second decimal of a depth only where it is needed', () => {
    expect(formatDepth(121.5)).toBe('121.5');
    expect(formatDepth(121.55)).toBe('121.55');
    expect(formatInterval(216, 223.5)).toBe(`216.0 – 223.5${s}m`);
  });
});

describe('shares', () => {
  it.each([
    [0, `0${s}%`],
    [0.0001, `<0.1${s}%`],
    [0.031, `3.1${s}%`],
    [0.53, `53${s}%`],
    [0.997, `99.7${s}%`],
    [0.9996, `>99.9${s}%`],
    [1, `100${s}%`],
    [Number.NaN, MISSING],
  ])('%d is %s', (share, text) => {
    expect(formatShare(share)).toBe(text);
  });
});

describe('grades', () => {
  // By definition: 1 % is one part in a hundred, 1 g/t one gram in a million grams, 1 ppb one part in 10^9.
  it.each([
    [26_100, '%', `2.61${s}%`],
    [1110, 'ppm', `1,110${s}ppm`],
    [1.25, 'g/t', `1.25${s}g/t`],
    [0.4, 'ppb', `400${s}ppb`],
    [null, '%', MISSING],
  ] as const)('%d ppm shown in %s is %s', (ppm, unit, text) => {
    expect(formatGrade(ppm, unit)).toBe(text);
  });

  it.each(['%', 'ppm', 'g/t', 'ppb'] as const)('turns %s to ppm and back', (unit) => {
    expect(gradeToPpm(gradeIn(1234.5, unit), unit)).toBeCloseTo(1234.5, 9);
  });
});

it('counts in words', () => {
  expect(countOf(1, 'hole')).toBe('1 hole');
  expect(countOf(1200, 'hole')).toBe('1,200 holes');
  expect(countOf(2, 'entry', 'entries')).toBe('2 entries');
});

it('writes small probabilities as bounds', () => {
  expect(formatP(0.0004)).toBe('<0.001');
  expect(formatP(0.31)).toBe('0.310');
});

it('writes sizes and checksums short', () => {
  expect(formatBytes(999)).toBe(`999${s}B`);
  expect(formatBytes(1_200_000)).toBe(`1.2${s}MB`);
  expect(formatHash('9f2c41aa7be0ffff')).toBe('9f2c 41aa 7be0');
});
