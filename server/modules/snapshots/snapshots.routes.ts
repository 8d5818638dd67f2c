import { Router } from 'express';
import { getSnapshot } from '#contract/snapshots.ts';
import { mount } from '#server/lib/mount.ts';
import type { JobsService } from '#server/modules/jobs/jobs.service.ts';
import type { SnapshotsService } from './snapshots.service.ts';

export function snapshotsRoutes(snapshots: SnapshotsService, jobs: JobsService): Router {
  const router = Router();
  mount(router, getSnapshot, async ({ params }) => {
    const latestJobs = await jobs.list(params.depositId);
    const assembling = latestJobs.some(({ kind, state }) => (kind === 'assemble' || kind === 'load-file') && (state === 'queued' || state === 'running'));
    return { snapshot: await snapshots.latest(params.depositId), assembling };
  });
  return router;
}
