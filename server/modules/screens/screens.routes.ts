import { Router } from 'express';
import { getScreen, getScreenCell, listScreens, startScreen } from '#contract/screens.ts';
import { mount } from '#server/lib/mount.ts';
import type { ScreensService } from './screens.service.ts';

export function screensRoutes(screens: ScreensService): Router {
  const router = Router();
  mount(router, listScreens, ({ params }) => screens.list(params.depositId));
  mount(router, getScreen, ({ params }) => screens.get(params.depositId, params.screenId));
  mount(router, getScreenCell, ({ params, query }) => screens.cell(params.depositId, params.screenId, query.subset, query.variable));
  mount(router, startScreen, ({ params, body, actor }) => screens.start(params.depositId, body, actor));
  return router;
}
