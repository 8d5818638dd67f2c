import { association } from './association.ts';
import { checkCategory, NOT_LOGGED, type Category } from './category.ts';
import { crossTabulate } from './cross-tabulation.ts';

/** Do groups follow rock, or the way samples were taken and assayed. */
export interface CampaignCheck {
  /** Bias-corrected V of group and campaign over all intervals; null without two levels of each. */
  overall: number | null;
  /** The same inside the commonest lithology; null without lithology or without two levels there. */
  insideLithology: { lithology: string; n: number; v: number | null } | null;
  isSuspect: boolean;
  text: string;
}

/** V above which a group may be a campaign (project rule). */
export const CAMPAIGN_V = 0.3;

/**
 * Checks a grouping against a campaign column: laboratory, digestion, batch year or drilling type.
 * Inside one lithology groups should not follow it; where they do, a group may be a campaign and not
 * rock, and has to be looked at before it is accepted.
 *
 * @param groups, campaign Label columns of n composites of equal support.
 * @param lithology A third column, to look inside the commonest rock; left out, the verdict rests on
 *   all intervals.
 * @throws {KernelError} `shape`; `bad-parameter` at a code without level.
 */
export function campaignCheck(
  groups: Category,
  campaign: Category,
  lithology?: Category,
): CampaignCheck {
  const n = groups.codes.length;
  checkCategory(groups, n, 'group');
  checkCategory(campaign, n, 'campaign');
  const overall = correctedV(groups, campaign);
  const inside = lithology ? insideCommonest(groups, campaign, lithology, n) : null;
  const v = lithology ? (inside?.v ?? null) : overall;
  const isSuspect = v !== null && v > CAMPAIGN_V;
  const where = inside ? `inside ${inside.lithology}` : 'over all intervals';
  if (v === null)
    return {
      overall,
      insideLithology: inside,
      isSuspect,
      text: `Nothing to compare ${where}: one side has a single level.`,
    };
  const meaning = isSuspect
    ? `more than ${CAMPAIGN_V}: groups may be campaigns, not rock`
    : `not above ${CAMPAIGN_V}`;
  const text = `V of group and campaign ${where} is ${v.toFixed(2)}, ${meaning}.`;
  return { overall, insideLithology: inside, isSuspect, text };
}

function correctedV(groups: Category, campaign: Category): number | null {
  const lengths = new Float64Array(groups.codes.length);
  const { counts, colLevels } = crossTabulate(groups, campaign, lengths);
  return colLevels.length === 0
    ? null
    : (association(counts, colLevels.length)?.cramersVCorrected ?? null);
}

function insideCommonest(
  groups: Category,
  campaign: Category,
  lithology: Category,
  n: number,
): CampaignCheck['insideLithology'] {
  checkCategory(lithology, n, 'lithology');
  const sizes = new Int32Array(lithology.levels.length);
  for (const code of lithology.codes) if (code !== NOT_LOGGED) sizes[code]! += 1;
  const most = sizes.reduce((best, size, code) => (size > (sizes[best] ?? 0) ? code : best), 0);
  if (!(sizes[most]! > 0)) return null;
  const keep = (_: number, row: number) => lithology.codes[row] === most;
  const within = ({ levels, codes }: Category): Category => ({ levels, codes: codes.filter(keep) });
  return {
    lithology: lithology.levels[most]!,
    n: sizes[most]!,
    v: correctedV(within(groups), within(campaign)),
  };
}
