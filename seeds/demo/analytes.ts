/** The 48 elements read after a four-acid digestion. */
// prettier-ignore
export const FOUR_ACID_ANALYTES = [
  'Ag', 'Al', 'As', 'Ba', 'Be', 'Bi', 'Ca', 'Cd', 'Ce', 'Co', 'Cr', 'Cs', 'Cu', 'Fe', 'Ga', 'Ge',
  'Hf', 'In', 'K', 'La', 'Li', 'Mg', 'Mn', 'Mo', 'Na', 'Nb', 'Ni', 'P', 'Pb', 'Rb', 'Re',
  'S', 'Sb', 'Sc', 'Se', 'Sn', 'Sr', 'Ta', 'Te', 'Th', 'Ti', 'Tl', 'U', 'V', 'W', 'Y', 'Zn', 'Zr',
] as const;

export type FourAcidAnalyte = (typeof FOUR_ACID_ANALYTES)[number];
/** Gold by fire assay and mercury by cold vapour, each its own method: neither survives four acids. */
export type AnalyteSymbol = FourAcidAnalyte | 'Au' | 'Hg';

/** One value per analyte, ppm unless said otherwise. */
export type Grades = Record<AnalyteSymbol, number>;

// prettier-ignore
const NOTHING: Readonly<Grades> = {
  Ag: 0, Al: 0, As: 0, Au: 0, Ba: 0, Be: 0, Bi: 0, Ca: 0, Cd: 0, Ce: 0, Co: 0, Cr: 0, Cs: 0, Cu: 0,
  Fe: 0, Ga: 0, Ge: 0, Hf: 0, Hg: 0, In: 0, K: 0, La: 0, Li: 0, Mg: 0, Mn: 0, Mo: 0, Na: 0, Nb: 0,
  Ni: 0, P: 0, Pb: 0, Rb: 0, Re: 0, S: 0, Sb: 0, Sc: 0, Se: 0, Sn: 0, Sr: 0, Ta: 0, Te: 0, Th: 0,
  Ti: 0, Tl: 0, U: 0, V: 0, W: 0, Y: 0, Zn: 0, Zr: 0,
};

export const noGrades = (): Grades => ({ ...NOTHING });

/** Sparse concentrations: analytes not named are absent. */
export type Traces = Partial<Grades>;

export const ALL_ANALYTES: readonly AnalyteSymbol[] = ['Au', 'Hg', ...FOUR_ACID_ANALYTES];

/** Concentrations as a short list, quick to add up. */
export type TraceList = readonly { analyte: AnalyteSymbol; ppm: number }[];

export function traceList(traces: Traces, factor = 1): TraceList {
  return ALL_ANALYTES.flatMap((analyte) => {
    const value = traces[analyte];
    return value === undefined ? [] : [{ analyte, ppm: value * factor }];
  });
}

/** Adds `share` times the listed concentrations; changes `into`. */
export function addTraces(into: Grades, traces: TraceList, share: number): void {
  for (const { analyte, ppm } of traces) into[analyte] += ppm * share;
}

/** Reported in per cent by the laboratory of this scenario; the rest in ppm. */
export const PERCENT_ANALYTES: ReadonlySet<AnalyteSymbol> = new Set<AnalyteSymbol>([
  'Al',
  'Ca',
  'Fe',
  'K',
  'Mg',
  'Na',
  'S',
  'Ti',
]);
