import { Router } from 'express';
import { downloadDemoFile, listDemoFiles } from '#contract/files.ts';
import { attachment } from '#server/lib/csv.ts';
import { notFound } from '#server/lib/errors.ts';
import { mount } from '#server/lib/mount.ts';
import type { DemoInstance } from './demo.ts';

/** Demonstration tables to download; on other instances there are none. */
export function demoRoutes(demo: Pick<DemoInstance, 'files' | 'file'> | null): Router {
  const router = Router();
  mount(router, listDemoFiles, () => {
    if (!demo) throw notFound('demonstration');
    return demo.files();
  });
  mount(router, downloadDemoFile, async ({ params, res }) => {
    if (!demo) throw notFound('demonstration');
    const path = await demo.file(params.name);
    res.setHeader('Content-Disposition', attachment(params.name));
    res.type('text/csv').sendFile(path);
  });
  return router;
}
