import { Router } from 'express';
import { getComponentRun, listComponentRuns, startComponents } from '#contract/components.ts';
import { mount } from '#server/lib/mount.ts';
import type { ComponentsService } from './components.service.ts';

export function componentsRoutes(components: ComponentsService): Router {
  const router = Router();
  mount(router, listComponentRuns, ({ params }) => components.list(params.depositId));
  mount(router, getComponentRun, ({ params }) => components.get(params.depositId, params.runId));
  mount(router, startComponents, ({ params, body, actor }) => components.start(params.depositId, body, actor));
  return router;
}
