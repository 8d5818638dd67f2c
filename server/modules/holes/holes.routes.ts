import { Router } from 'express';
import { getHole, listHoles } from '#contract/holes.ts';
import { mount } from '#server/lib/mount.ts';
import type { HolesService } from './holes.service.ts';

export function holesRoutes(holes: HolesService): Router {
  const router = Router();
  mount(router, listHoles, ({ params }) => holes.list(params.depositId));
  mount(router, getHole, ({ params }) => holes.get(params.depositId, params.hole));
  return router;
}
