import { Router } from 'express';
import { getGrouping, listGroupings, listSweeps, startGrouping, startSweep, updateGroup, useGrouping } from '#contract/groupings.ts';
import { mount } from '#server/lib/mount.ts';
import type { GroupingsService } from './groupings.service.ts';

export function groupingsRoutes(groupings: GroupingsService): Router {
  const router = Router();
  mount(router, listSweeps, ({ params }) => groupings.sweeps(params.depositId));
  mount(router, startSweep, ({ params, body, actor }) => groupings.startSweep(params.depositId, body, actor));
  mount(router, listGroupings, ({ params }) => groupings.list(params.depositId));
  mount(router, getGrouping, ({ params }) => groupings.get(params.depositId, params.groupingId));
  mount(router, startGrouping, ({ params, body, actor }) => groupings.start(params.depositId, body, actor));
  mount(router, useGrouping, ({ params, actor }) => groupings.use(params.depositId, params.groupingId, actor));
  mount(router, updateGroup, ({ params, body, expectedVersion, actor }) => groupings.updateGroup(params.depositId, params.groupingId, params.label, body, expectedVersion, actor));
  return router;
}
