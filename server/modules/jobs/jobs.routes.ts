import { Router } from 'express';
import { cancelJob, getJob, listJobs, streamEvents } from '#contract/jobs.ts';
import { mount } from '#server/lib/mount.ts';
import { streamDeposit } from './event-stream.ts';
import type { Events } from './events.ts';
import type { JobsService } from './jobs.service.ts';

export function jobsRoutes(jobs: JobsService, events: Events): Router {
  const router = Router();
  mount(router, listJobs, ({ params }) => jobs.list(params.depositId));
  mount(router, getJob, ({ params }) => jobs.get(params.depositId, params.jobId));
  mount(router, cancelJob, ({ params, actor, member }) =>
    jobs.cancel(params.depositId, params.jobId, { id: actor.id, role: member.role }),
  );
  mount(router, streamEvents, ({ params: { depositId }, req, res }) =>
    streamDeposit(res, depositId, {
      events,
      currentJobs: () => jobs.list(depositId),
      lastEventId: req.get('last-event-id'),
    }),
  );
  return router;
}
