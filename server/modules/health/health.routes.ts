import { Router } from 'express';
import { getHealth, getOpenApi, getReadiness } from '#contract/health.ts';
import { mount } from '#server/lib/mount.ts';
import type { Check } from './readiness.ts';

const okay = { ok: true } as const;

export function healthRoutes(checks: readonly Check[], describe: () => object): Router {
  const router = Router();
  mount(router, getHealth, () => okay);
  mount(router, getReadiness, async ({ res }) => {
    const answers = await Promise.all(checks.map((check) => check()));
    const causes = answers.filter((cause) => cause !== null);
    if (causes.length > 0) res.status(503);
    return { ok: causes.length === 0, causes };
  });
  mount(router, getOpenApi, () => describe());
  return router;
}
