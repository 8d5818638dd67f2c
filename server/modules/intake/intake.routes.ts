import { Router } from 'express';
import {
  checkFile, discardUpload, downloadProblems, downloadUpload, getUpload, listProblems, listRevisions, listUploads, loadFile, previewRows, saveMapping, uploadFiles, useRevision,
} from '#contract/files.ts';
import { attachment } from '#server/lib/csv.ts';
import { mount } from '#server/lib/mount.ts';
import type { IntakeService, ReceivedFile } from './intake.service.ts';
import { receiveFiles } from './receive-files.ts';

export function intakeRoutes(intake: IntakeService, incomingDir: string): Router {
  const router = Router();
  mount(router, uploadFiles, ({ params, actor, req }) => {
    const received: ReceivedFile[] = Array.isArray(req.files) ? req.files : [];
    return intake.receive(params.depositId, received, actor);
  }, { upload: receiveFiles(incomingDir) });
  mount(router, listUploads, ({ params }) => intake.list(params.depositId));
  mount(router, getUpload, ({ params }) => intake.get(params.depositId, params.uploadId));
  mount(router, downloadUpload, async ({ params, res }) => {
    const { path, fileName } = await intake.path(params.depositId, params.uploadId);
    res.setHeader('Content-Disposition', attachment(fileName));
    res.setHeader('Content-Security-Policy', "sandbox; default-src 'none'");
    res.type('application/octet-stream').sendFile(path);
  });
  mount(router, discardUpload, ({ params, actor }) => intake.discard(params.depositId, params.uploadId, actor));
  mount(router, saveMapping, ({ params, body }) => intake.saveMapping(params.depositId, params.uploadId, body));
  mount(router, previewRows, ({ params, body }) => intake.preview(params.depositId, params.uploadId, body.mapping, body.rows));
  mount(router, checkFile, ({ params, actor }) => intake.check(params.depositId, params.uploadId, actor));
  mount(router, loadFile, ({ params, body, actor }) => intake.load(params.depositId, params.uploadId, body.mode, actor));
  mount(router, listProblems, ({ params, query }) => intake.problems(params.depositId, params.uploadId, query));
  mount(router, downloadProblems, async ({ params, res }) => {
    const { fileName, csv } = await intake.problemsCsv(params.depositId, params.uploadId);
    res.setHeader('Content-Disposition', attachment(fileName));
    res.type('text/csv').send(csv);
  });
  mount(router, listRevisions, ({ params }) => intake.revisions(params.depositId));
  mount(router, useRevision, ({ params, actor }) => intake.useRevision(params.depositId, params.revisionId, actor));
  return router;
}
