import type { DipTest } from './dip-test.ts';
import { BIC_STEP, MIN_SHARE, type LognormalMixture } from './lognormal-mixture.ts';
import { clearestCut, MIN_SIDE_SHARE, type Separation } from './separation.ts';
import type { SkewedPopulation } from './skewed-population.ts';
import type { TruncatedPopulation } from './truncated-population.ts';

/** What a mixing verdict is drawn from. */
export interface VerdictInput {
  /** Rows. */
  n: number;
  /** Effective rows, the n of BIC. */
  effectiveN: number;
  /** Fits of 1, 2, ... lognormal populations. */
  fits: readonly LognormalMixture[];
  /** Fewest populations that BIC asks for. */
  chosen: LognormalMixture;
  skewed: SkewedPopulation;
  /** Null where values below detection hide the lower edge. */
  truncated: TruncatedPopulation | null;
  dip: DipTest;
  /** Unit of the grades, for the reasons; left out when they have none. */
  unit?: string | undefined;
}

/** Thresholds of the mixing verdict: this project's own choice, tuned on generated truth. */
export const VERDICT_RULES = {
  /** Fewer rows get no verdict. */
  minRows: 30,
  /** BIC gain that is strong evidence: over one lognormal population, and over the best single one. */
  gain: BIC_STEP,
  /** Gain per effective row that matters: large n must not turn a shoulder into a mixture. */
  gainPerRow: 0.02,
  /** For suspicion: a single population of other form may win by up to this, or gain half as much per row. */
  doubt: 6,
  someGainPerRow: 0.01,
  /** Ashman D of two sides that stand apart, and that half do. */
  separation: 2,
  someSeparation: 1.5,
  /** Least share of the smaller side, and for suspicion. */
  share: MIN_SIDE_SHARE,
  someShare: MIN_SHARE,
  /** Dip: nominal p, and the least dip that matters at any n. */
  dipP: 0.05,
  dip: 0.01,
} as const;

/** The best-fitting single population. */
export interface BestSingle {
  kind: 'lognormal' | 'skewed' | 'truncated';
  bic: number;
}

/** Evidence weighed against the rules. */
export interface Evidence {
  /** The mixture looked at: the chosen one, or that of two populations when one was chosen. */
  mixture: LognormalMixture | null;
  bestSingle: BestSingle;
  /** BIC of one lognormal, and of the best single population, less that of the mixture. */
  gainLognormal: number | null;
  gainBestSingle: number | null;
  /** Clearest cut with both sides 3 % or more. */
  cut: Separation | null;
  /** A dip that is significant and large enough to matter. */
  dipClear: boolean;
  /** The mixture is strongly preferred and its sides stand apart. */
  mixtureClear: boolean;
  /** The mixture is preferred to one lognormal, but the effect or its lead over other forms is small. */
  mixtureSuspect: boolean;
}

/** Weighs the evidence for more than one population. */
export function weighEvidence(input: VerdictInput): Evidence {
  const { fits, chosen, dip, effectiveN } = input;
  const rules = VERDICT_RULES;
  const mixture = chosen.k > 1 ? chosen : (fits.find((fit) => fit.k === 2 && fit.accepted) ?? null);
  const bestSingle = bestSingleOf(input);
  const lognormalBic = fits.find((fit) => fit.k === 1)?.bic ?? null;
  const mixtureBic = mixture?.bic ?? null;
  const gainOver = (bic: number | null) =>
    bic === null || mixtureBic === null ? null : bic - mixtureBic;
  const gainLognormal = gainOver(lognormalBic);
  const gainBestSingle = gainOver(bestSingle.bic);
  const cut = mixture ? clearestCut(mixture.normal, rules.someShare) : null;
  const dipClear = dip.pValue !== null && dip.pValue.p <= rules.dipP && dip.dip >= rules.dip;
  const lead = gainBestSingle ?? -Infinity;
  const preferred = (gainLognormal ?? -Infinity) >= rules.gain;
  const apart = cut !== null && cut.ashmanD >= rules.separation;
  const sidesLarge = cut !== null && Math.min(cut.lowerShare, cut.upperShare) >= rules.share;
  const strongLead = lead >= Math.max(rules.gain, rules.gainPerRow * effectiveN);
  const someLead = lead >= Math.max(rules.gain, rules.someGainPerRow * effectiveN);
  const noGreatLoss = lead > Math.max(-rules.doubt, rules.someGainPerRow * effectiveN - rules.gain);
  const halfApart = cut !== null && sidesLarge && cut.ashmanD >= rules.someSeparation;
  return {
    mixture,
    bestSingle,
    gainLognormal,
    gainBestSingle,
    cut,
    dipClear,
    mixtureClear: preferred && apart && sidesLarge && (strongLead || (dipClear && lead >= 0)),
    mixtureSuspect: preferred && ((apart && noGreatLoss) || (halfApart && someLead)),
  };
}

function bestSingleOf({ fits, skewed, truncated }: VerdictInput): BestSingle {
  const lognormal = fits.find((fit) => fit.k === 1)?.bic ?? Infinity;
  const candidates: BestSingle[] = [
    { kind: 'lognormal', bic: lognormal },
    { kind: 'skewed', bic: skewed.bic },
  ];
  if (truncated) candidates.push({ kind: 'truncated', bic: truncated.bic });
  return candidates.reduce((best, next) => (next.bic < best.bic ? next : best));
}
