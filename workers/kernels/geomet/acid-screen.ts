import { KernelError } from '#kernels/kernel-error.ts';

/** What must stand beside every acid screening result, wherever it is shown. */
export const ACID_CAUTION =
  'Acid-forming screening only, by total sulphur and carbon: never a classification for a permit or for building a waste dump. Confirm by static and kinetic tests under local rules. It supports, and does not replace, the judgement of a qualified (competent) person.';

/** Assays and tests of one interval. Null where not measured. */
export interface AcidAssay {
  /** Total sulphur, mass %. */
  sulphurPercent: number;
  /** Sulphate sulphur, mass %: taken off. Jarosite and alunite hold acidity nevertheless. */
  sulphatePercent?: number | null;
  /** Acid neutralising capacity by titration, kg H2SO4/t; goes before carbon. */
  ancKgPerT?: number | null;
  /** Inorganic carbon, mass %. */
  carbonPercent?: number | null;
  /** Carbon of siderite and ankerite iron, mass %: neutralises nothing in the end. */
  ironCarbonatePercent?: number | null;
  /** pH after net acid generation by peroxide. */
  nagPh?: number | null;
}

/** NPR below `lower` is potentially acid forming, above `upper` not; some rules ask for 3. */
export interface AcidLimits {
  lower: number;
  upper: number;
  nagPh: number;
}

export const DEFAULT_ACID_LIMITS: AcidLimits = { lower: 1, upper: 2, nagPh: 4.5 };

export type AcidClass = 'potentially-acid-forming' | 'uncertain' | 'not-acid-forming';

/** Acid-base account of one interval. Screening only: see ACID_CAUTION. */
export interface AcidScreen {
  sulphidePercent: number;
  /** Maximum potential acidity and capacity against it, kg H2SO4/t. */
  mpa: number;
  anc: number | null;
  /** MPA - ANC. */
  napp: number | null;
  ancOverMpa: number | null;
  /** Acid and neutralising potential, kg CaCO3/t, their difference NP - AP and ratio NP / AP. */
  ap: number;
  np: number | null;
  nnp: number | null;
  npr: number | null;
  /** By NAPP and NAG pH together; null without either. */
  classByNag: AcidClass | null;
  /** By NPR; null without a neutralising potential. */
  classByRatio: AcidClass | null;
  notes: string[];
}

/** kg H2SO4/t per % S as pyrite; 98.072 / 32.06 x 10 is 30.5901. */
const MPA_PER_SULPHUR = 30.6;
/** kg CaCO3/t per % S, and per % C as calcite. */
const AP_PER_SULPHUR = 31.25;
const NP_PER_CARBON = 83.3;
/** kg H2SO4 that 1 kg CaCO3 neutralises. */
const ACID_PER_CALCITE = 0.979877;

/**
 * Screens an interval for acid formation by its sulphur and its capacity to neutralise.
 *
 * @throws {KernelError} `bad-parameter` at a grade outside 0..100 %, a capacity or pH that is none, or
 *   limits out of order.
 * @see AMIRA (2002), ARD Test Handbook P387A; Sobek et al. (1978), EPA-600/2-78-054; Price (2009), MEND
 *   1.20.1 (from memory but for the factors 31.25 and 83.3).
 */
export function acidScreen(assay: AcidAssay, limits: AcidLimits = DEFAULT_ACID_LIMITS): AcidScreen {
  checkAssay(assay);
  if (!(limits.lower >= 0 && limits.upper >= limits.lower && limits.nagPh >= 0)) {
    const found = `${limits.lower}, ${limits.upper}, ${limits.nagPh}`;
    throw new KernelError('bad-parameter', `expected limits in order, found ${found}`);
  }
  const notes: string[] = [];
  const { sulphatePercent = null, nagPh = null } = assay;
  const sulphate = sulphatePercent ?? 0;
  if (sulphatePercent === null) notes.push('all sulphur taken as sulphide');
  if (sulphate > assay.sulphurPercent) notes.push('more sulphate than total sulphur: taken as all');
  const sulphidePercent = Math.max(0, assay.sulphurPercent - sulphate);
  const [mpa, ap] = [MPA_PER_SULPHUR * sulphidePercent, AP_PER_SULPHUR * sulphidePercent];
  const np = neutralisingPotential(assay, notes);
  const anc = np === null ? null : np * ACID_PER_CALCITE;
  const napp = anc === null ? null : mpa - anc;
  const npr = np === null || ap === 0 ? null : np / ap;
  return {
    sulphidePercent,
    mpa,
    anc,
    napp,
    ancOverMpa: anc === null || mpa === 0 ? null : anc / mpa,
    ap,
    np,
    nnp: np === null ? null : np - ap,
    npr,
    classByNag: classByNag(napp, nagPh, limits),
    classByRatio: np === null ? null : classByRatio(npr, limits),
    notes,
  };
}

/** kg CaCO3/t from the titration, else from carbon; null with neither. */
function neutralisingPotential(assay: AcidAssay, notes: string[]): number | null {
  const { ancKgPerT = null, carbonPercent = null, ironCarbonatePercent = null } = assay;
  if (ancKgPerT !== null) return ancKgPerT / ACID_PER_CALCITE;
  if (carbonPercent === null) return null;
  const iron = ironCarbonatePercent ?? 0;
  if (iron > carbonPercent) notes.push('more carbon of iron carbonates than carbon: taken as all');
  if (ironCarbonatePercent === null) {
    notes.push('all carbon taken as calcite: siderite and ankerite would neutralise less');
  }
  return NP_PER_CARBON * Math.max(0, carbonPercent - iron);
}

function classByNag(
  napp: number | null,
  nagPh: number | null,
  limits: AcidLimits,
): AcidClass | null {
  if (napp === null || nagPh === null) return null;
  if (napp > 0 && nagPh < limits.nagPh) return 'potentially-acid-forming';
  return napp < 0 && nagPh >= limits.nagPh ? 'not-acid-forming' : 'uncertain';
}

/** A ratio of null has no sulphide to form acid from. */
function classByRatio(npr: number | null, { lower, upper }: AcidLimits): AcidClass {
  if (npr === null || npr > upper) return 'not-acid-forming';
  return npr < lower ? 'potentially-acid-forming' : 'uncertain';
}

function checkAssay({ ancKgPerT = null, nagPh = null, ...percents }: AcidAssay): void {
  for (const [name, percent] of Object.entries(percents)) {
    if (percent === null || percent === undefined || (percent >= 0 && percent <= 100)) continue;
    throw new KernelError('bad-parameter', `expected ${name} in 0..100, found ${percent}`);
  }
  const isPh = nagPh === null || (nagPh >= 0 && nagPh <= 14);
  if ((ancKgPerT === null || (ancKgPerT >= 0 && ancKgPerT < Infinity)) && isPh) return;
  const found = `${ancKgPerT ?? 'none'}, ${nagPh ?? 'none'}`;
  throw new KernelError(
    'bad-parameter',
    `expected a capacity >= 0 and a pH in 0..14, found ${found}`,
  );
}
