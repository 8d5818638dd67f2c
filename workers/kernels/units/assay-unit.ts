import { KernelError } from '#kernels/kernel-error.ts';

/** Troy ounce in grams (31.1034768 exactly, the international definition of the grain). */
const TROY_OUNCE_G = 31.1034768;
/** Short ton (2000 lb) and long ton (2240 lb) in tonnes; 1 lb = 0.45359237 kg exactly. */
const SHORT_TON_T = 0.90718474;
const LONG_TON_T = 1.0160469088;

/** Units an assay may be written in, with the factor to ppm (mg/kg), the unit of storage. */
const PPM_PER_UNIT = {
  ppm: 1,
  ppb: 1e-3,
  '%': 1e4,
  'g/t': 1,
  'mg/kg': 1,
  'ug/kg': 1e-3,
  'kg/t': 1e3,
  'oz/st': TROY_OUNCE_G / SHORT_TON_T,
  'oz/lt': TROY_OUNCE_G / LONG_TON_T,
  'oz/t': TROY_OUNCE_G,
} as const;

export type AssayUnit = keyof typeof PPM_PER_UNIT;

/** A unit found in a header; `isLoose` when the trade writes it for more than one unit. */
export interface UnitReading {
  unit: AssayUnit;
  isLoose: boolean;
}

const SPELLINGS: ReadonlyMap<string, UnitReading> = new Map(
  (
    [
      ['ppm', 'ppm'],
      ['ppb', 'ppb'],
      ['%', '% pct pc percent wt% wtpct %wt wt.% perc'],
      ['g/t', 'g/t gpt gt g/tonne'],
      ['mg/kg', 'mg/kg mgkg mgpkg'],
      ['ug/kg', 'ug/kg ugkg'],
      ['kg/t', 'kg/t kgpt kgt'],
      ['oz/st', 'oz/st ozst'],
      ['oz/lt', 'oz/lt ozlt'],
    ] as const
  ).flatMap(([unit, words]) =>
    words.split(' ').map((word): [string, UnitReading] => [word, { unit, isLoose: false }]),
  ),
);

const LOOSE_SPELLINGS: ReadonlyMap<string, UnitReading> = new Map(
  (
    [
      ['oz/t', 'oz/t ozt'],
      ['oz/st', 'opt oz'],
    ] as const
  ).flatMap(([unit, words]) =>
    words.split(' ').map((word): [string, UnitReading] => [word, { unit, isLoose: true }]),
  ),
);

/** Reads a unit token such as `PPM`, `pct` or `g_t`; null when it is none. */
export function readUnit(token: string): UnitReading | null {
  const key = token.toLowerCase().replace(/[µμ]/g, 'u').replaceAll('_', '');
  return SPELLINGS.get(key) ?? LOOSE_SPELLINGS.get(key) ?? null;
}

/** Factor from a unit to ppm: multiply a grade by it. */
export function ppmPerUnit(unit: AssayUnit): number {
  return PPM_PER_UNIT[unit];
}

/**
 * A grade in ppm (mg/kg); NaN where missing stays NaN.
 *
 * @throws {KernelError} `not-finite` for an infinite grade.
 */
export function toPpm(grade: number, unit: AssayUnit): number {
  if (Math.abs(grade) === Infinity)
    throw new KernelError('not-finite', `expected a grade in ${unit}, found ${grade}`);
  return grade * PPM_PER_UNIT[unit];
}
