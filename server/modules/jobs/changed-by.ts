import type { JobKind } from '#contract/jobs.ts';

const ANALYSES = ['component-runs', 'sweeps', 'groupings', 'screens', 'domains', 'evidence', 'zone-runs', 'code-sets'];

/** Resources (path parts below the deposit) that read otherwise once a job of the kind is done. */
export const CHANGED_BY: Readonly<Record<JobKind, readonly string[]>> = {
  'check-file': ['uploads'],
  'load-file': ['uploads', 'revisions', 'snapshot', 'record'],
  // A new snapshot makes every analysis on the one before stale.
  assemble: ['snapshot', 'holes', 'revisions', 'suites', ...ANALYSES],
  components: ['component-runs', 'record'],
  sweep: ['sweeps', 'record'],
  grouping: ['groupings', 'domains', 'record'],
  screen: ['screens', 'record'],
  evidence: ['evidence', 'domains', 'record'],
  zones: ['zone-runs', 'record'],
  codes: ['code-sets', 'record'],
};
