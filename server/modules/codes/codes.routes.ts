import { Router } from 'express';
import { downloadCodes, getCodeSet, listCodeSets, makeCodes, verifyCodes } from '#contract/codes.ts';
import { attachment } from '#server/lib/csv.ts';
import { mount } from '#server/lib/mount.ts';
import type { CodesService } from './codes.service.ts';

export function codesRoutes(codes: CodesService): Router {
  const router = Router();
  mount(router, listCodeSets, ({ params }) => codes.list(params.depositId));
  mount(router, getCodeSet, ({ params }) => codes.get(params.depositId, params.codeSetId));
  mount(router, makeCodes, ({ params, actor }) => codes.make(params.depositId, actor));
  mount(router, downloadCodes, async ({ params, res }) => {
    const { path, sha256, fileName } = await codes.file(params.depositId, params.codeSetId);
    res.setHeader('Content-Disposition', attachment(fileName));
    res.setHeader('Repr-Digest', `sha-256=:${Buffer.from(sha256, 'hex').toString('base64')}:`);
    res.setHeader('X-Content-SHA256', sha256);
    res.type('text/csv').sendFile(path);
  });
  mount(router, verifyCodes, ({ params, actor }) => codes.verify(params.depositId, params.codeSetId, actor));
  return router;
}
