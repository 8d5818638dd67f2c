import { KernelError } from '#kernels/kernel-error.ts';
import type { PartProfile } from './part-profile.ts';

/** What screening proposes for one analyte; a person may decide otherwise. */
export interface PartDecision {
  decision: 'keep' | 'keep-with-imputation' | 'drop';
  reason: string;
  /** Things to know about a part that is kept, and to mend about one that is dropped. */
  cautions: string[];
}

/** Steps of the screening, all editable. Shares of rows; cv is a fraction. */
export interface ScreeningLimits {
  /** Up to here simple replacement is adequate. */
  simpleReplacement: number;
  /** Up to here replacement is acceptable but leaves its mark; above, a part must prove its use. */
  modelReplacement: number;
  /** Above this share below detection a part says only above or below. */
  indicatorOnly: number;
  missing: number;
  cvOfDuplicates: number;
  /** Share of measured rows in four values above which rounding steps are named. */
  stepped: number;
  /** Ratio of detection limits within a column above which it should be brought to one limit. */
  limitStep: number;
}

/** This project's choice, but for the replacement steps. */
export const DEFAULT_SCREENING: ScreeningLimits = {
  simpleReplacement: 0.05,
  modelReplacement: 0.3,
  indicatorOnly: 0.5,
  missing: 0.1,
  cvOfDuplicates: 0.3,
  stepped: 0.2,
  limitStep: 3,
};

/** Lost to the fumes or held back: off by default for four-acid digestion (from memory). */
const LOST_BY_FOUR_ACID = new Set(['B', 'Si', 'Hg', 'Re', 'Se', 'Te', 'Sn', 'W']);
/** Held in minerals the digestion may not open: kept, but flagged (from memory). */
const PARTLY_OPENED = new Set([
  'Zr',
  'Hf',
  'Ti',
  'Ba',
  'Cr',
  'Nb',
  'Ta',
  'Yb',
  'Lu',
  'Tm',
  'Er',
  'Ho',
  'Dy',
]);

export interface PartToScreen {
  /** Element symbol, or LOI. */
  element: string;
  profile: PartProfile;
  /** Average relative error of duplicates as a fraction; null when not known. */
  cvOfDuplicates?: number | null;
  digestion?: 'four-acid' | 'total' | 'unknown';
}

/**
 * Proposes which analytes to keep as parts of a log-ratio analysis, by their share below detection,
 * missing share, precision and digestion.
 *
 * @returns One decision per analyte, in order.
 * @throws {KernelError} `too-few-parts` when fewer than three analytes are given; `bad-parameter` at an
 *   error of duplicates that is none.
 * @see Martin-Fernandez, Barcelo-Vidal & Pawlowsky-Glahn (2003), Math. Geol. 35 (small shares).
 */
export function screenParts(
  parts: readonly PartToScreen[],
  limits: ScreeningLimits = DEFAULT_SCREENING,
): PartDecision[] {
  if (parts.length < 3) {
    const message = `expected at least 3 analytes, found ${parts.length}`;
    throw new KernelError('too-few-parts', message, { found: parts.length });
  }
  for (const { element, cvOfDuplicates = null } of parts) {
    if (cvOfDuplicates === null || (cvOfDuplicates >= 0 && cvOfDuplicates < Infinity)) continue;
    const message = `expected an error of duplicates >= 0 of ${element}, found ${cvOfDuplicates}`;
    throw new KernelError('bad-parameter', message);
  }
  return parts.map((part) => screenPart(part, limits));
}

function screenPart(part: PartToScreen, limits: ScreeningLimits): PartDecision {
  const cautions = cautionsOf(part, limits);
  const drop = dropReason(part, limits);
  if (drop) return { decision: 'drop', reason: drop, cautions };
  const { nBelow, nRows, nMissing } = part.profile;
  const share = nBelow / (nRows - nMissing);
  if (nBelow === 0)
    return { decision: 'keep', reason: 'measured above its limit in every row', cautions };
  const shown = `${percent(share)} below detection`;
  const reason =
    share <= limits.simpleReplacement
      ? `${shown}: simple replacement is adequate`
      : `${shown}: replacement by one value may form a group of its own, compare with the part left out`;
  return { decision: 'keep-with-imputation', reason, cautions };
}

function dropReason(part: PartToScreen, limits: ScreeningLimits): string | null {
  const { element, profile, cvOfDuplicates = null, digestion = 'unknown' } = part;
  const { nRows, nMissing, nBelow } = profile;
  if (nRows === nMissing) return 'no row was analysed for it';
  const missing = nMissing / nRows;
  const below = nBelow / (nRows - nMissing);
  if (element === 'LOI') return 'loss on ignition is no part';
  if (element === 'Au')
    return 'gold is kept beside the parts: nuggets, and a digestion that is no gold assay';
  if (missing > limits.missing)
    return `${percent(missing)} of the rows miss it; restrict the rows to keep it`;
  if (below > limits.indicatorOnly)
    return `${percent(below)} below detection: use it as above or below its limit`;
  if (below > limits.modelReplacement) {
    return `${percent(below)} below detection: add it back only if it separates units`;
  }
  if (cvOfDuplicates !== null && cvOfDuplicates > limits.cvOfDuplicates) {
    return `duplicates differ by ${percent(cvOfDuplicates)} on average`;
  }
  if (digestion === 'four-acid' && LOST_BY_FOUR_ACID.has(element)) {
    return 'lost or not held in solution by four-acid digestion';
  }
  return null;
}

function cautionsOf(
  { element, profile, digestion }: PartToScreen,
  limits: ScreeningLimits,
): string[] {
  const cautions: string[] = [];
  if (profile.steppedShare > limits.stepped) {
    cautions.push(
      `four values make up ${percent(profile.steppedShare)} of the measured rows: rounding steps`,
    );
  }
  const [finest = NaN] = profile.limits;
  const coarsest = profile.limits[profile.limits.length - 1] ?? NaN;
  if (coarsest / finest >= limits.limitStep) {
    cautions.push(
      `the detection limit changes from ${finest} to ${coarsest} ppm: bring it to one limit`,
    );
  }
  if (profile.nAbove > 0) {
    const share = profile.nAbove / (profile.nRows - profile.nMissing);
    cautions.push(`${percent(share)} above the upper limit, taken at the limit`);
  }
  if (digestion === 'four-acid' && PARTLY_OPENED.has(element)) {
    cautions.push(
      'four-acid digestion may open its minerals only in part: a change of laboratory can look like a unit',
    );
  }
  return cautions;
}

function percent(share: number): string {
  return `${Number((100 * share).toPrecision(2))} %`;
}
