import { Router } from 'express';
import { createSuite, deleteSuite, listSuites, updateSuite } from '#contract/suites.ts';
import { mount } from '#server/lib/mount.ts';
import type { SuitesService } from './suites.service.ts';

export function suitesRoutes(suites: SuitesService): Router {
  const router = Router();
  mount(router, listSuites, ({ params }) => suites.list(params.depositId));
  mount(router, createSuite, ({ params, body, actor }) => suites.create(params.depositId, body, actor));
  mount(router, updateSuite, ({ params, body, expectedVersion, actor }) => suites.update(params.depositId, params.suiteId, body, expectedVersion, actor));
  mount(router, deleteSuite, ({ params, expectedVersion, actor }) => suites.remove(params.depositId, params.suiteId, expectedVersion, actor));
  return router;
}
