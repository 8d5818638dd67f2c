import { join } from 'node:path';
import type { Router } from 'express';
import { openColumnStore, type ColumnStore } from './db/column-store.ts';
import { codesRoutes } from './modules/codes/codes.routes.ts';
import { createCodes } from './modules/codes/codes.service.ts';
import { componentsRoutes } from './modules/components/components.routes.ts';
import { createComponents } from './modules/components/components.service.ts';
import { registerEvidence } from './modules/domains/domains.jobs.ts';
import { domainsRoutes } from './modules/domains/domains.routes.ts';
import { createDomains } from './modules/domains/domains.service.ts';
import { geometRoutes } from './modules/geomet/geomet.routes.ts';
import { createGeomet } from './modules/geomet/geomet.service.ts';
import { groupingsRoutes } from './modules/groupings/groupings.routes.ts';
import { createGroupings } from './modules/groupings/groupings.service.ts';
import { holesRoutes } from './modules/holes/holes.routes.ts';
import { createHoles } from './modules/holes/holes.service.ts';
import { createFileStore } from './modules/intake/file-store.ts';
import { registerIntakeJobs } from './modules/intake/intake.jobs.ts';
import { intakeRoutes } from './modules/intake/intake.routes.ts';
import { createIntake } from './modules/intake/intake.service.ts';
import { revisionsRepository } from './modules/intake/revisions.repository.ts';
import { uploadsRepository } from './modules/intake/uploads.repository.ts';
import { createEvents } from './modules/jobs/events.ts';
import { jobsRoutes } from './modules/jobs/jobs.routes.ts';
import { createJobsService } from './modules/jobs/jobs.service.ts';
import { overviewRoutes } from './modules/overview/overview.routes.ts';
import { createOverview } from './modules/overview/overview.service.ts';
import type { RecordService } from './modules/record/record.service.ts';
import { screensRoutes } from './modules/screens/screens.routes.ts';
import { createScreens } from './modules/screens/screens.service.ts';
import { registerAssembly } from './modules/snapshots/snapshots.jobs.ts';
import { snapshotsRoutes } from './modules/snapshots/snapshots.routes.ts';
import { createSnapshots } from './modules/snapshots/snapshots.service.ts';
import { suitesRoutes } from './modules/suites/suites.routes.ts';
import { createSuites } from './modules/suites/suites.service.ts';
import { tablesRoutes } from './modules/tables/tables.routes.ts';
import type { AppDeps } from './services.ts';

/** The services of the stages, from intake to codes, in the order they stand on each other. */
export function createAnalysis(deps: AppDeps, record: RecordService) {
  const { env, db, clock, compute, log } = deps;
  const store: ColumnStore = openColumnStore(env.paths.database, { readonly: true });
  const events = createEvents();
  const jobs = createJobsService({ db, compute, events, log, clock });
  const snapshots = createSnapshots(db);
  const shared = { db, clock, jobs, record, snapshots };
  const intakeDeps = { ...shared, compute, files: createFileStore(env.paths.uploads), uploads: uploadsRepository(db), revisions: revisionsRepository(db) };
  const intake = createIntake(intakeDeps);
  registerIntakeJobs(intakeDeps);
  registerAssembly(shared);
  const holes = createHoles(db, store, snapshots);
  const suites = createSuites(db, clock, record, snapshots);
  const components = createComponents(shared, suites);
  const groupings = createGroupings(shared, components);
  const screens = createScreens(shared, groupings);
  const domains = createDomains(shared, groupings);
  registerEvidence(shared, groupings, domains);
  const geomet = createGeomet(shared, groupings, domains);
  const codes = createCodes({ ...shared, compute, codesDir: join(env.paths.root, 'codes') }, groupings, domains, geomet);
  const overview = createOverview({ db, jobs, snapshots, intake, suites, components, groupings, screens, domains, geomet, codes });
  return { store, events, jobs, snapshots, intake, holes, suites, components, groupings, screens, domains, geomet, codes, overview };
}
export type Analysis = ReturnType<typeof createAnalysis>;

/** One line per module. */
export function analysisRouters(analysis: Analysis, deps: AppDeps): Router[] {
  const { jobs, events, snapshots } = analysis;
  return [
    jobsRoutes(jobs, events),
    tablesRoutes(analysis.store),
    intakeRoutes(analysis.intake, deps.env.paths.incoming),
    snapshotsRoutes(snapshots, jobs),
    holesRoutes(analysis.holes),
    suitesRoutes(analysis.suites),
    componentsRoutes(analysis.components),
    groupingsRoutes(analysis.groupings),
    screensRoutes(analysis.screens),
    domainsRoutes(analysis.domains),
    geometRoutes(analysis.geomet),
    codesRoutes(analysis.codes),
    overviewRoutes(analysis.overview),
  ];
}
