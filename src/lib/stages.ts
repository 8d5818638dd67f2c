import type { StageKey } from '#contract/deposits.ts';
import type { Role } from '#contract/roles.ts';

/** A stage's name in the rail and the last part of its address. */
export const STAGE_NAMES: Record<StageKey, string> = {
  deposit: 'Deposit',
  intake: 'Intake',
  suite: 'Suite',
  components: 'Components',
  groups: 'Groups',
  populations: 'Populations',
  domains: 'Domains',
  geomet: 'Geomet',
  releases: 'Releases',
  record: 'Record',
};

export const stagePath = (depositId: number, key: StageKey): string =>
  key === 'deposit' ? `/deposits/${depositId}` : `/deposits/${depositId}/${key}`;

export const ROLE_NAMES: Record<Role, string> = {
  lead: 'Lead',
  geologist: 'Geologist',
  geometallurgist: 'Geometallurgist',
  'site-geologist': 'Site geologist',
  estimator: 'Estimator',
  viewer: 'Viewer',
};

/** What a role may write, for the choice of a role. */
export const ROLE_RIGHTS: Record<Role, string> = {
  lead: 'everything, and adds people',
  geologist: 'everything but signing and people',
  geometallurgist: 'deleterious limits and zones',
  'site-geologist': 'reads; answers from site',
  estimator: 'reads; takes and checks codes',
  viewer: 'reads only',
};
