import type { GradeUnit } from '#contract/deposits.ts';

/**
 * Stands between a number and its unit and does not break. In our type a no-break space is a fifth of
 * an em, a thin space by width; its own thin space is a tenth, too little to see.
 */
export const THIN_SPACE = '\u00a0';
export const MINUS = '\u2212';
export const MISSING = '\u2013';

/** Parts per million in one of each unit. A gram per tonne is one part per million by mass. */
const PPM_PER_UNIT: Record<GradeUnit, number> = { '%': 1e4, ppm: 1, 'g/t': 1, ppb: 1e-3 };

/** Figures follow the reader's locale on screen; files always have a point. */
let numberLocale: string | undefined;

export function setNumberLocale(locale: string | undefined): void {
  numberLocale = locale;
  formats.clear();
}

const formats = new Map<string, Intl.NumberFormat>();

function numberFormat(options: Intl.NumberFormatOptions): Intl.NumberFormat {
  const key = JSON.stringify(options);
  const known = formats.get(key);
  if (known) return known;
  const made = new Intl.NumberFormat(numberLocale, options);
  formats.set(key, made);
  return made;
}

function written(value: number, options: Intl.NumberFormatOptions): string {
  if (!Number.isFinite(value)) return MISSING;
  const text = numberFormat(options).format(value);
  return text.replace(/^[-\u2212]/, MINUS);
}

/** With so many decimals, always all of them. */
export const formatFixed = (value: number, decimals: number): string =>
  written(value, { minimumFractionDigits: decimals, maximumFractionDigits: decimals });

/**
 * With at most so many significant figures, but whole numbers are never rounded away: 1,114 stays
 * 1,114 with three. Zeros that only fill up are left out: 0.53, not 0.530.
 */
export function formatFigures(value: number, figures = 3): string {
  if (!Number.isFinite(value)) return MISSING;
  if (value === 0) return '0';
  const magnitude = Math.floor(Math.log10(Math.abs(value)));
  return written(value, {
    maximumFractionDigits: Math.min(10, Math.max(0, figures - 1 - magnitude)),
  });
}

export const formatCount = (count: number): string => written(count, { maximumFractionDigits: 0 });

/** "1 hole", "24 holes". */
export const countOf = (count: number, one: string, many = `${one}s`): string =>
  `${formatCount(count)} ${count === 1 ? one : many}`;

/** A length in metres: whole from 1,000 on, else with one decimal. */
export const formatMetres = (metres: number): string =>
  Number.isFinite(metres)
    ? `${formatFixed(metres, Math.abs(metres) >= 1000 ? 0 : 1)}${THIN_SPACE}m`
    : MISSING;

/** A depth as logged, without its unit: two decimals only where the second is needed. */
export const formatDepth = (metres: number): string =>
  formatFixed(metres, Math.abs(metres * 10 - Math.round(metres * 10)) > 1e-6 ? 2 : 1);

/** "216.0 – 223.5 m" */
export const formatInterval = (fromM: number, toM: number): string =>
  `${formatDepth(fromM)} ${MISSING} ${formatDepth(toM)}${THIN_SPACE}m`;

/** A share of 1 as a percentage: whole from 10 %, one decimal below; what is there is never "0 %", what lacks something never "100 %". */
export function formatShare(share: number): string {
  if (!Number.isFinite(share)) return MISSING;
  const percent = share * 100;
  if (percent > 0 && percent < 0.05) return `<${formatFixed(0.1, 1)}${THIN_SPACE}%`;
  if (percent >= 99.5 && percent < 100) return percent < 99.95 ? `${formatFixed(percent, 1)}${THIN_SPACE}%` : `>${formatFixed(99.9, 1)}${THIN_SPACE}%`;
  const decimals = percent === 0 || Math.abs(percent) >= 9.95 ? 0 : 1;
  return `${formatFixed(percent, decimals)}${THIN_SPACE}%`;
}

/** Storage is ppm; pages show the deposit's own unit. */
export const gradeIn = (ppm: number, unit: GradeUnit): number => ppm / PPM_PER_UNIT[unit];
export const gradeToPpm = (value: number, unit: GradeUnit): number => value * PPM_PER_UNIT[unit];

/** A stored grade with its unit: "2.61 %", "1,110 ppm". */
export function formatGrade(ppm: number | null, unit: GradeUnit, figures = 3): string {
  if (ppm === null || !Number.isFinite(ppm)) return MISSING;
  return withUnit(formatFigures(gradeIn(ppm, unit), figures), unit);
}

export const withUnit = (text: string, unit: string): string =>
  text === MISSING ? text : `${text}${THIN_SPACE}${unit}`;

/** A probability: three decimals; below one in a thousand says so. */
export const formatP = (p: number): string =>
  !Number.isFinite(p) ? MISSING : p < 0.001 ? `<${formatFixed(0.001, 3)}` : formatFixed(p, 3);

const BYTE_UNITS = ['B', 'kB', 'MB', 'GB', 'TB'];

export function formatBytes(bytes: number): string {
  let size = bytes;
  let unit = 0;
  while (size >= 1000 && unit < BYTE_UNITS.length - 1) {
    size /= 1000;
    unit++;
  }
  return withUnit(unit === 0 ? formatCount(size) : formatFigures(size, 2), BYTE_UNITS[unit] ?? 'B');
}

/** A checksum short enough to compare by eye: "9f2c 41aa 7be0". */
export const formatHash = (hash: string, groups = 3): string =>
  (hash.slice(0, groups * 4).match(/.{1,4}/g) ?? []).join(' ');
