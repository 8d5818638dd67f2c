import { PERCENT_ANALYTES } from './analytes.ts';
import type { AnalyteSymbol, Grades } from './analytes.ts';
import type { Campaign } from './holes.ts';
import type { Noise } from './noise.ts';

/** Lower limits of the newer method, ppm. */
// prettier-ignore
const NEW_LIMITS: Grades = {
  Ag: 0.01, Al: 100, As: 0.2, Au: 0.001, Ba: 1, Be: 0.05, Bi: 0.01, Ca: 100, Cd: 0.02, Ce: 0.02, Co: 0.1,
  Cr: 1, Cs: 0.05, Cu: 0.2, Fe: 100, Ga: 0.05, Ge: 0.05, Hf: 0.1, Hg: 0.005, In: 0.005, K: 100, La: 0.5,
  Li: 0.2, Mg: 100, Mn: 5, Mo: 0.05, Na: 100, Nb: 0.1, Ni: 0.2, P: 10, Pb: 0.5, Rb: 0.1, Re: 0.002,
  S: 100, Sb: 0.05, Sc: 0.1, Se: 1, Sn: 0.2, Sr: 0.2, Ta: 0.05, Te: 0.05, Th: 0.01, Ti: 50, Tl: 0.02,
  U: 0.1, V: 1, W: 0.1, Y: 0.1, Zn: 2, Zr: 0.5,
};

/** How many times higher the older method's limits stood; elements not named had the same. */
// prettier-ignore
const OLD_LIMIT_FACTORS: Partial<Grades> = {
  Ag: 10, As: 5, Au: 5, Be: 2, Bi: 10, Cd: 5, Cs: 2, Ge: 5, Hg: 2, In: 4, Mo: 5, Re: 2.5, Sb: 10, Se: 5,
  Sn: 5, Ta: 2, Te: 10, Tl: 10, W: 5, Pb: 2, Cu: 5,
};

/** Above this the older laboratory wrote `>10000` and ran the sample again by the ore-grade method. */
export const ROUTINE_CAP_PPM = 10000;
export const ORE_GRADE_ANALYTES = ['Cu', 'Zn', 'Pb'] as const;
const CAPPED: ReadonlySet<AnalyteSymbol> = new Set<AnalyteSymbol>([...ORE_GRADE_ANALYTES, 'As']);

/** Relative standard deviations of one reading. */
const TRACE_NOISE = 0.05;
const MAJOR_NOISE = 0.03;
const ORE_GRADE_NOISE = 0.02;

export function limitPpm(analyte: AnalyteSymbol, campaign: Campaign): number {
  return NEW_LIMITS[analyte] * (campaign === 1 ? (OLD_LIMIT_FACTORS[analyte] ?? 1) : 1);
}

/** Plain decimal text, no finer than the limit's step and of four significant figures at most. */
function decimalText(value: number, step: number): string {
  const byStep = Math.max(0, Math.ceil(-Math.log10(step) - 1e-9));
  const byFigures = Math.max(0, 3 - Math.floor(Math.log10(Math.max(value, 1e-9))));
  const perUnit = 10 ** Math.min(byStep, byFigures);
  return String(Math.round(value * perUnit) / perUnit);
}

/** Cell of the routine method: noisy, rounded, below limit or over range as this campaign writes it. */
export function routineCell(
  truePpm: number,
  analyte: AnalyteSymbol,
  campaign: Campaign,
  noise: Noise,
): string {
  const limit = limitPpm(analyte, campaign);
  const major = PERCENT_ANALYTES.has(analyte);
  const read =
    truePpm * noise.lognormal(major ? MAJOR_NOISE : TRACE_NOISE) + 0.25 * limit * noise.normal();
  const perUnit = major ? 1e4 : 1;
  if (read < limit)
    return `${campaign === 1 ? '<' : '-'}${Number((limit / perUnit).toPrecision(3))}`;
  if (campaign === 1 && CAPPED.has(analyte) && read > ROUTINE_CAP_PPM) return `>${ROUTINE_CAP_PPM}`;
  return decimalText(read / perUnit, limit / perUnit);
}

/** Cell of the ore-grade method in per cent. */
export function oreGradeCell(truePpm: number, noise: Noise): string {
  return decimalText((truePpm / 1e4) * noise.lognormal(ORE_GRADE_NOISE), 0.001);
}
