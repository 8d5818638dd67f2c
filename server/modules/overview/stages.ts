import type { Stage, StageKey, StageState } from '#contract/deposits.ts';

/** What is known of a deposit's work, enough to tell each stage's state. */
export interface Standing {
  hasCollars: boolean;
  hasRows: boolean;
  isAssembling: boolean;
  filesWaiting: number;
  suites: number;
  /** Newest of each: null = none; true = stands on an older snapshot. */
  componentsStale: boolean | null;
  groupingStale: boolean | null;
  screenStale: boolean | null;
  mixedCells: number;
  domains: number;
  unassignedIntervals: number;
  domainsStale: boolean;
  evidenceMissing: number;
  limits: number;
  zonesStale: boolean | null;
  codesStale: boolean | null;
}

const stage = (key: StageKey, state: StageState, word: string, extra: { count?: number; waitsFor?: string } = {}): Stage => ({
  key, state, word, count: extra.count ?? null, waitsFor: extra.waitsFor ?? null,
});

/** Empty until it can start, then ready, then done or stale. */
function run(key: StageKey, canStart: boolean, waitsFor: string, stale: boolean | null): Stage {
  if (stale !== null) return stale ? stage(key, 'stale', 'stale') : stage(key, 'done', 'done');
  return canStart ? stage(key, 'ready', 'ready') : stage(key, 'empty', 'waits', { waitsFor });
}

function intakeStage(s: Standing): Stage {
  if (s.filesWaiting > 0) return stage('intake', 'attention', `${s.filesWaiting} to load`, { count: s.filesWaiting });
  if (s.isAssembling) return stage('intake', 'attention', 'joining', { count: 1 });
  return s.hasRows ? stage('intake', 'done', 'done') : stage('intake', 'ready', s.hasCollars ? 'needs assays' : 'ready');
}

function domainsStage(s: Standing): Stage {
  if (s.domains === 0) return run('domains', s.groupingStale !== null, 'Groups: domains are accepted from groups.', null);
  if (s.domainsStale) return stage('domains', 'stale', 'stale');
  if (s.evidenceMissing > 0) return stage('domains', 'attention', `${s.evidenceMissing} to test`, { count: s.evidenceMissing });
  return stage('domains', 'done', 'done');
}

/** State of each stage in the order of the job. */
export function stagesOf(s: Standing): Stage[] {
  return [
    stage('deposit', 'done', 'done'),
    intakeStage(s),
    s.suites > 0 ? stage('suite', 'done', 'done') : run('suite', s.hasRows, 'Intake: a suite is chosen from loaded analytes.', null),
    run('components', s.suites > 0, 'Suite: components are found in a suite of analytes.', s.componentsStale),
    run('groups', s.componentsStale !== null, 'Components: groups are found among component scores.', s.groupingStale),
    run('populations', s.hasRows, 'Intake: grades are screened once assays are loaded.', s.screenStale),
    domainsStage(s),
    s.limits > 0 || s.zonesStale !== null ? run('geomet', true, '', s.zonesStale) : run('geomet', s.hasRows, 'Intake: zones are flagged on loaded assays.', null),
    run('releases', s.domains > 0, 'Domains: codes are made from accepted domains.', s.codesStale),
    stage('record', 'done', 'done'),
  ];
}
