import type { SignFlipTest } from '#kernels/statistics/sign-flip.ts';

/** Limits of the reading (project rule). */
export const CONTACT_RULES = {
  /** Fewest contacts for a verdict. */
  contacts: 10,
  /** Difference of near means over the larger that counts as a step. */
  difference: 0.3,
  p: 0.05,
  /** |Spearman| of grade and distance on one side that counts as a trend. */
  trend: 0.3,
  /** Bins a side's trend is looked for in. */
  trendBins: 5,
} as const;

/** What a contact profile says about sharing composites across the contact. */
export interface ContactReading {
  /** Null without enough contacts. */
  verdict: 'hard' | 'soft' | 'gradational' | null;
  reason: string;
}

export interface ContactEvidence {
  /** Contacts with grades on both sides. */
  contacts: number;
  nearMeans: { first: number; second: number } | null;
  test: SignFlipTest | null;
  trend: { first: number | null; second: number | null };
}

/**
 * Hard: a step at the contact (near means differ by more than 30 % of the larger, p < .05) and level
 * ground on both sides. Soft: the sides next to the contact cannot be told apart (p >= .05).
 * Gradational: otherwise. Under 10 contacts there is no verdict.
 */
export function readContact({ contacts, nearMeans, test, trend }: ContactEvidence): ContactReading {
  const rules = CONTACT_RULES;
  if (contacts < rules.contacts || !nearMeans || !test)
    return {
      verdict: null,
      reason: `${contacts} contacts with grades on both sides, ${rules.contacts} are needed for a verdict.`,
    };
  const { first, second } = nearMeans;
  const difference = Math.abs(first - second) / Math.max(first, second);
  const found = `Means next to the contact differ by ${(100 * difference).toFixed(0)} % of the larger (p ${test.p.toFixed(3)})`;
  if (test.p >= rules.p)
    return { verdict: 'soft', reason: `${found}: the two sides cannot be told apart there.` };
  const steepest = Math.max(Math.abs(trend.first ?? 0), Math.abs(trend.second ?? 0));
  if (difference <= rules.difference)
    return {
      verdict: 'gradational',
      reason: `${found}, no more than ${100 * rules.difference} %.`,
    };
  return steepest < rules.trend
    ? { verdict: 'hard', reason: `${found}, with no trend on either side.` }
    : {
        verdict: 'gradational',
        reason: `${found}, with a trend towards it (Spearman ${steepest.toFixed(2)}).`,
      };
}
