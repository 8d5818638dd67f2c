import { Router } from 'express';
import { downloadZones, getZoneRules, listZoneRuns, listZones, saveZoneRules, startZones } from '#contract/geomet.ts';
import { attachment } from '#server/lib/csv.ts';
import { mount } from '#server/lib/mount.ts';
import type { GeometService } from './geomet.service.ts';

export function geometRoutes(geomet: GeometService): Router {
  const router = Router();
  mount(router, getZoneRules, ({ params }) => geomet.rules(params.depositId));
  mount(router, saveZoneRules, ({ params, body, expectedVersion, actor }) => geomet.saveRules(params.depositId, body, expectedVersion, actor));
  mount(router, listZoneRuns, ({ params }) => geomet.list(params.depositId));
  mount(router, startZones, ({ params, actor }) => geomet.start(params.depositId, actor));
  mount(router, listZones, ({ params, query }) => geomet.zones(params.depositId, params.runId, query));
  mount(router, downloadZones, async ({ params, res }) => {
    const csv = await geomet.zonesCsv(params.depositId, params.runId);
    res.setHeader('Content-Disposition', attachment(`zones-${params.runId}.csv`));
    res.type('text/csv').send(csv);
  });
  return router;
}
