import { Router } from 'express';
import { getOverview, listStages } from '#contract/deposits.ts';
import { mount } from '#server/lib/mount.ts';
import type { OverviewService } from './overview.service.ts';

export function overviewRoutes(overview: OverviewService): Router {
  const router = Router();
  mount(router, getOverview, ({ params }) => overview.overview(params.depositId));
  mount(router, listStages, ({ params }) => overview.stages(params.depositId));
  return router;
}
