import {
  VERDICT_RULES,
  weighEvidence,
  type Evidence,
  type VerdictInput,
} from './verdict-evidence.ts';
import type { Separation } from './separation.ts';

export type MixingVerdict = 'single' | 'suspect' | 'mixed' | 'too-few';

/** A verdict and what it stands on. */
export interface Verdict {
  verdict: MixingVerdict;
  /** In words, the weightiest first. */
  reasons: string[];
  /** BIC of one lognormal population less that of the mixture looked at; null without one. */
  deltaBic: number | null;
  /** BIC of the best single population of any form less that of the mixture. */
  deltaBicBestSingle: number | null;
  /** The clearest cut of the mixture looked at. */
  separation: Separation | null;
}

/**
 * The mixing verdict of a grade distribution.
 *
 * - `mixed`: strong evidence and effect. Two or more lognormal populations beat every single one tried
 *   (lognormal, skewed, cut off at its ends) by BIC 10 and by .02 per row, and their sides stand apart
 *   (Ashman D 2 or more) with 5 % or more each; a clear dip may stand in for part of that lead.
 * - `suspect`: evidence of one kind only, such as a dip without a mixture, or a mixture that one skewed
 *   population explains nearly as well, or with a smaller side of 3 to 5 %, or half apart.
 * - `single`: neither. `too-few`: under 30 rows.
 *
 * Rows down a hole are not independent, so the evidence is nominal.
 */
export function mixingVerdict(input: VerdictInput): Verdict {
  if (input.n < VERDICT_RULES.minRows) {
    const reasons = [`${input.n} rows are too few: a verdict needs ${VERDICT_RULES.minRows}.`];
    return {
      verdict: 'too-few',
      reasons,
      deltaBic: null,
      deltaBicBestSingle: null,
      separation: null,
    };
  }
  const evidence = weighEvidence(input);
  const verdict = evidence.mixtureClear
    ? 'mixed'
    : evidence.mixtureSuspect || evidence.dipClear
      ? 'suspect'
      : 'single';
  return {
    verdict,
    reasons: [mixtureReason(input, evidence), ...sidesReason(input, evidence), dipReason(input, evidence)],
    deltaBic: evidence.gainLognormal,
    deltaBicBestSingle: evidence.gainBestSingle,
    separation: evidence.cut,
  };
}

const COUNT_WORDS = ['No', 'One', 'Two', 'Three', 'Four'];

/** Whether several populations explain the grades better than one. */
function mixtureReason(
  { fits, skewed, truncated, effectiveN, unit }: VerdictInput,
  { mixture, gainLognormal, gainBestSingle, bestSingle, mixtureClear }: Evidence,
): string {
  if (!mixture || gainLognormal === null || gainBestSingle === null) {
    const why = fits.find((fit) => fit.k === 2)?.note ?? 'too few different values';
    return `No fit of two populations passed the guards: ${why}.`;
  }
  if (gainLognormal < VERDICT_RULES.gain) {
    return `One lognormal population is enough: two lower BIC by ${whole(Math.max(0, gainLognormal))}, less than ${VERDICT_RULES.gain}.`;
  }
  const several = `${COUNT_WORDS[mixture.k] ?? mixture.k} lognormal populations beat one by BIC ${whole(gainLognormal)}`;
  if (bestSingle.kind === 'lognormal' || mixtureClear) {
    const other =
      bestSingle.kind === 'lognormal'
        ? ''
        : `, and any single population tried by ${whole(gainBestSingle)}`;
    return `${several}${other} (10 is very strong evidence).`;
  }
  const form =
    bestSingle.kind === 'skewed'
      ? `one skewed population (power ${skewed.power.toFixed(2)} in place of the logarithm)`
      : `one population cut off at ${grade(Math.exp(truncated?.from ?? NaN), unit)} and ${grade(Math.exp(truncated?.to ?? NaN), unit)}`;
  if (gainBestSingle <= 0)
    return `${several}, but ${form} explains the grades at least as well (BIC lower by ${whole(-gainBestSingle)}).`;
  const small =
    gainBestSingle < VERDICT_RULES.gain
      ? 'less than 10'
      : `${(gainBestSingle / effectiveN).toFixed(3)} per row`;
  return `${several}, but ${form} comes within ${whole(gainBestSingle)} of that (${small}).`;
}

/** How far the sides stand apart; nothing when no mixture is preferred. */
function sidesReason({ unit }: VerdictInput, { cut, gainLognormal }: Evidence): string[] {
  if ((gainLognormal ?? -Infinity) < VERDICT_RULES.gain) return [];
  if (!cut) return [`No cut leaves both sides ${100 * VERDICT_RULES.someShare} % or more.`];
  const { ashmanD, lowerMedian, upperMedian, lowerShare, upperShare } = cut;
  const distance = ashmanD >= VERDICT_RULES.separation ? 'stand apart' : 'overlap';
  const smaller = 100 * Math.min(lowerShare, upperShare);
  const sides = `The sides at ${grade(lowerMedian, unit)} and ${grade(upperMedian, unit)} ${distance} (Ashman D ${ashmanD.toFixed(1)}; 2 is clear)`;
  const small = smaller < 100 * VERDICT_RULES.share ? `, under ${100 * VERDICT_RULES.share} %` : '';
  return [`${sides}; the smaller holds ${smaller.toFixed(smaller < 10 ? 1 : 0)} %${small}.`];
}

function dipReason({ dip }: VerdictInput, { dipClear }: Evidence): string {
  const found = `dip ${dip.dip.toFixed(4)}, nominal p ${dip.pValue?.text ?? 'not given'}`;
  if (dipClear) return `The distribution has more than one mode (${found}).`;
  const significant = (dip.pValue?.p ?? 1) <= VERDICT_RULES.dipP;
  return significant
    ? `A second mode is significant but too slight to matter (${found}).`
    : `No second mode is shown (${found}).`;
}

/** A whole number in figures: 621,878. */
const whole = (value: number): string => Math.round(value).toLocaleString('en');

/** A grade with three significant digits, never in exponents, and its unit. */
function grade(value: number, unit?: string): string {
  const text =
    value > 0
      ? Number(value.toPrecision(3)).toLocaleString('en', { maximumFractionDigits: 12 })
      : String(value);
  return unit ? `${text} ${unit}` : text;
}
