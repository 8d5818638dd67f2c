import { Router } from 'express';
import { downloadAudit, listAudit } from '#contract/record.ts';
import { attachment } from '#server/lib/csv.ts';
import { mount } from '#server/lib/mount.ts';
import type { RecordService } from './record.service.ts';

export function recordRoutes(record: RecordService): Router {
  const router = Router();
  mount(router, listAudit, ({ params, query }) => record.list(params.depositId, query));
  mount(router, downloadAudit, async ({ params, res }) => {
    const csv = await record.csv(params.depositId);
    res.setHeader('Content-Disposition', attachment(`record-of-deposit-${params.depositId}.csv`));
    res.type('text/csv').send(csv);
  });
  return router;
}
