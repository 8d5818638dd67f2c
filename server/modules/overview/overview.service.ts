import type { Knex } from 'knex';
import type { Deposit, Overview, Stage } from '#contract/deposits.ts';
import type { DomainList } from '#contract/domains.ts';
import type { Screen } from '#contract/screens.ts';
import type { Snapshot } from '#contract/snapshots.ts';
import type { AuditRow } from '#server/modules/record/audit-chain.ts';
import type { CodesService } from '#server/modules/codes/codes.service.ts';
import type { ComponentsService } from '#server/modules/components/components.service.ts';
import { depositById, storedParts } from '#server/modules/deposits/deposits.repository.ts';
import type { DepositSummary } from '#server/modules/deposits/deposits.service.ts';
import type { DomainsService } from '#server/modules/domains/domains.service.ts';
import type { GeometService } from '#server/modules/geomet/geomet.service.ts';
import type { GroupingsService } from '#server/modules/groupings/groupings.service.ts';
import type { IntakeService } from '#server/modules/intake/intake.service.ts';
import type { JobsService } from '#server/modules/jobs/jobs.service.ts';
import type { ScreensService } from '#server/modules/screens/screens.service.ts';
import type { SnapshotsService } from '#server/modules/snapshots/snapshots.service.ts';
import type { SuitesService } from '#server/modules/suites/suites.service.ts';
import { stagesOf, type Standing } from './stages.ts';

export interface OverviewSources {
  db: Knex;
  jobs: JobsService;
  snapshots: SnapshotsService;
  intake: IntakeService;
  suites: SuitesService;
  components: ComponentsService;
  groupings: GroupingsService;
  screens: ScreensService;
  domains: DomainsService;
  geomet: GeometService;
  codes: CodesService;
}

const LATELY = 10;
const km = (metres: number): string => `${Math.round(metres).toLocaleString('en-GB')} m`;
function shareOf(part: number, whole: number): string {
  if (!(whole > 0)) return '–';
  const percent = (100 * part) / whole;
  if (percent >= 100) return '100 %';
  return percent > 99.9 ? '>99.9 %' : `${percent.toFixed(1)} %`;
}

/** Mixed grades that matter: in the groups domains are made of, or, before there are groups, anywhere. */
function mixedCellsOf(screen: Screen | null): number {
  const mixed = screen?.cells.filter(({ verdict }) => verdict === 'mixed') ?? [];
  const groups = new Set(screen?.subsets.flatMap(({ kind, key }) => (kind === 'group' ? [key] : [])));
  return groups.size === 0 ? mixed.length : mixed.filter(({ subsetKey }) => groups.has(subsetKey)).length;
}

export function createOverview(sources: OverviewSources) {
  const { db, jobs, snapshots, intake, suites, components, groupings, screens, domains, geomet, codes } = sources;

  async function facts(depositId: number) {
    const [snapshot, uploads, revisions, suiteList, runs, grouping, screenList, domainList, rules, zoneRuns, codeSets, jobList] = await Promise.all([
      snapshots.latest(depositId), intake.list(depositId), intake.revisions(depositId), suites.list(depositId), components.list(depositId), groupings.active(depositId),
      screens.list(depositId), domains.list(depositId), geomet.rules(depositId), geomet.list(depositId), codes.list(depositId), jobs.list(depositId),
    ]);
    return { snapshot, uploads, revisions, suiteList, runs, grouping, screen: screenList[0] ?? null, domainList, rules, zoneRun: zoneRuns[0] ?? null, codeSet: codeSets[0] ?? null, jobList };
  }
  type Facts = Awaited<ReturnType<typeof facts>>;

  function standingOf(f: Facts): Standing {
    const current = f.revisions.filter(({ isCurrent }) => isCurrent);
    return {
      hasCollars: current.some(({ kind }) => kind === 'collar'),
      hasRows: current.some(({ kind }) => kind === 'assay' || kind === 'surface') && f.snapshot !== null,
      isAssembling: f.jobList.some(({ kind, state }) => kind === 'assemble' && (state === 'queued' || state === 'running')),
      filesWaiting: f.uploads.filter(({ state }) => state !== 'loaded').length,
      suites: f.suiteList.length,
      componentsStale: f.runs[0]?.isStale ?? null,
      groupingStale: f.grouping?.isStale ?? null,
      screenStale: f.screen?.isStale ?? null,
      mixedCells: mixedCellsOf(f.screen),
      domains: f.domainList.domains.length,
      unassignedIntervals: f.domainList.unassigned.intervals,
      domainsStale: f.domainList.isStale,
      evidenceMissing: f.domainList.domains.filter(({ hasEvidence, evidenceIsStale }) => !hasEvidence || evidenceIsStale).length,
      limits: f.rules.limits.length,
      zonesStale: f.zoneRun?.isStale ?? null,
      codesStale: f.codeSet?.isStale ?? null,
    };
  }

  async function lately(depositId: number): Promise<Overview['lately']> {
    const rows = await db<AuditRow>('audit_entries').where({ chain: depositId }).orderBy('number', 'desc').limit(LATELY).select('at', 'who', 'sentence');
    return rows.map(({ at, who, sentence }) => ({ at, who, what: sentence.startsWith(`${who} `) ? sentence.slice(who.length + 1) : sentence }));
  }

  async function grades(depositId: number, list: DomainList, pay: Deposit['payAnalytes']): Promise<Overview['grades']> {
    const evidence = await Promise.all(list.domains.map(async ({ id, code }) => ({ code, found: await domains.evidence(depositId, id) })));
    return evidence.flatMap(({ code, found }) => (found?.grades ?? []).flatMap(({ analyte, median, verdict }) => {
      const unit = pay.find((candidate) => candidate.analyte === analyte)?.unit;
      return unit ? [{ domainCode: code, analyte, unit, median, verdict, n: found?.intervals ?? 0 }] : [];
    }));
  }

  return {
    async stages(depositId: number): Promise<Stage[]> {
      return stagesOf(standingOf(await facts(depositId)));
    },

    async overview(depositId: number): Promise<Overview> {
      const f = await facts(depositId);
      const row = await depositById(db, depositId);
      const pay = row ? storedParts(row).payAnalytes : [];
      return {
        finding: findingOf(f.snapshot, f.domainList, f.codeSet), totalMetres: f.snapshot?.metresDrilled ?? 0, metres: metresOf(f),
        waiting: waitingOf(standingOf(f)), lately: await lately(depositId), grades: await grades(depositId, f.domainList, pay),
      };
    },

    /** Counts for the list of deposits. */
    async summaries(depositIds: readonly number[]): Promise<ReadonlyMap<number, DepositSummary>> {
      const entries = await Promise.all(depositIds.map(async (depositId): Promise<[number, DepositSummary] | null> => {
        const snapshot = await snapshots.latest(depositId);
        if (!snapshot) return null;
        const list = await domains.list(depositId);
        return [depositId, { holes: snapshot.holes, metres: snapshot.metresDrilled, finding: findingOf(snapshot, list, null) }];
      }));
      return new Map(entries.filter((entry) => entry !== null));
    },
  };

  function metresOf({ snapshot, grouping, domainList }: Facts): Overview['metres'] {
    if (!snapshot || snapshot.metresDrilled === 0) return [];
    const drilled = snapshot.metresDrilled;
    const grouped = grouping?.support === 'drill' ? grouping.groups.reduce((sum, { metres }) => sum + metres, 0) : 0;
    const coded = grouping?.support === 'drill' ? domainList.domains.reduce((sum, { metres }) => sum + metres, 0) : 0;
    const isStale = grouping?.isStale ?? false;
    return [
      { label: 'Drilled', metres: drilled, note: `${snapshot.holes} holes`, isStale: false },
      { label: 'Assayed', metres: snapshot.metresAssayed, note: shareOf(snapshot.metresAssayed, drilled), isStale: false },
      { label: 'Logged', metres: snapshot.metresLogged, note: shareOf(snapshot.metresLogged, drilled), isStale: false },
      { label: 'Grouped', metres: grouped, note: grouping ? `on snapshot ${grouping.snapshotNumber}` : 'not yet', isStale },
      { label: 'Coded', metres: coded, note: `${domainList.domains.length} domains`, isStale },
    ];
  }
}
export type OverviewService = ReturnType<typeof createOverview>;

function findingOf(snapshot: Snapshot | null, { domains, unassigned, isStale }: DomainList, codeSet: { number: number; isStale: boolean } | null): string {
  if (!snapshot) return 'Nothing is loaded yet. Bring in collars, surveys, assays and logs to begin.';
  const ground = snapshot.holes > 0 ? `${snapshot.holes} holes, ${km(snapshot.metresDrilled)}` : `${snapshot.surfaceRows} surface samples`;
  if (domains.length === 0) return `${ground} loaded. No candidate domain is accepted yet.`;
  if (isStale) return `${ground} loaded. Newer tables have made the groups under ${domains.length} domains stale.`;
  const left = unassigned.intervals === 0 ? 'every interval has a code' : `${unassigned.intervals.toLocaleString('en-GB')} intervals are unassigned`;
  const codes = codeSet ? ` Codes ${codeSet.number} ${codeSet.isStale ? 'are older than the domains' : 'stand'}.` : '';
  return `${ground}; ${domains.length} candidate domains, ${left}.${codes}`;
}

function waitingOf(s: Standing): Overview['waiting'] {
  const waiting: Overview['waiting'] = [];
  const add = (stage: Overview['waiting'][number]['stage'], tone: Overview['waiting'][number]['tone'], title: string, detail: string): void => void waiting.push({ stage, tone, title, detail });
  if (!s.hasRows) add('intake', 'note', 'Bring in files', s.hasCollars ? 'Assays or surface samples come next' : 'Collars first, then surveys, assays and logs');
  if (s.filesWaiting > 0) add('intake', 'warn', `Load ${s.filesWaiting} ${s.filesWaiting === 1 ? 'file' : 'files'}`, 'Uploaded and not loaded yet');
  if (s.hasRows && s.suites === 0) add('suite', 'note', 'Choose a suite', 'The analytes that log-ratios are taken of');
  if (s.suites > 0 && s.componentsStale === null) add('components', 'note', 'Find components', 'Log-ratio components of the suite');
  if (s.componentsStale) add('components', 'stale', 'Find components again', 'They lack the tables loaded since');
  if (s.componentsStale === false && s.groupingStale === null) add('groups', 'note', 'Group the intervals', 'Sweep the number of groups first');
  if (s.groupingStale) add('groups', 'stale', 'Run groups again', 'They lack the tables loaded since');
  if (s.screenStale) add('populations', 'stale', 'Screen again', 'The matrix lacks the tables loaded since');
  if (s.mixedCells > 0) add('populations', 'warn', `Look at ${s.mixedCells} mixed ${s.mixedCells === 1 ? 'grade' : 'grades'}`, 'Each is more than one population in its group');
  if (s.groupingStale === false && s.domains === 0) add('domains', 'note', 'Accept candidate domains', 'From groups that hold one population');
  if (s.evidenceMissing > 0) add('domains', 'warn', `Test ${s.evidenceMissing} ${s.evidenceMissing === 1 ? 'domain' : 'domains'}`, 'Evidence is missing or older than the domain');
  if (s.domains > 0 && s.unassignedIntervals > 0) add('domains', 'warn', `${s.unassignedIntervals.toLocaleString('en-GB')} intervals have no domain`, 'They go out as UNASSIGNED');
  if (s.zonesStale) add('geomet', 'stale', 'Flag zones again', 'Tables, limits or domains changed since');
  if (s.codesStale) add('releases', 'stale', 'Make codes again', 'Tables or domains changed since');
  return waiting;
}
