import { createHash } from 'node:crypto';
import * as z from 'zod';
import { Id } from '#contract/common.ts';
import { AppError, orNotFound } from '#server/lib/errors.ts';
import { inFigures } from '#server/lib/figures.ts';
import { enqueueAssembly } from '#server/modules/snapshots/enqueue-assembly.ts';
import type { CheckFileInput, CheckFileOutput } from '#workers/tasks/check-file.ts';
import type { LoadFileInput, LoadFileOutput } from '#workers/tasks/load-file.ts';
import type { IntakeDeps } from './intake.service.ts';
import { revisionsRepository } from './revisions.repository.ts';
import { LOADED_ALREADY, mappingOf, uploadsRepository, type UploadRow } from './uploads.repository.ts';

const CheckParams = z.strictObject({ uploadId: Id });
const LoadParams = CheckParams.extend({ mode: z.enum(['replace', 'add']) });

const sha256 = (text: string): string => createHash('sha256').update(text).digest('hex');

/** Two requests of one instant are both taken; the load that comes second, at its start or its end, finds it done. */
function refuseSecond({ state }: Pick<UploadRow, 'state'>): void {
  if (state === 'loaded') throw new AppError(409, 'upload-loaded', LOADED_ALREADY);
}

/** Registers checking and loading of files as jobs; a load is followed by putting the tables together. */
export function registerIntakeJobs({ clock, jobs, record, files, uploads, revisions }: IntakeDeps): void {
  async function readInput(depositId: number, uploadId: number) {
    const row = orNotFound(await uploads.row(depositId, uploadId), 'upload');
    const collars = await revisions.currentTable(depositId, 'collar');
    return { row, input: { path: files.pathOf(row.stored_name), encoding: row.encoding, mapping: mappingOf(row), collarTableId: collars?.table_id ?? null } };
  }

  jobs.register<CheckFileInput, CheckFileOutput>('check-file', {
    task: 'check-file',
    async prepare({ depositId, params }) {
      const { uploadId } = CheckParams.parse(params);
      const { input } = await readInput(depositId, uploadId);
      return { ...input, baseTableId: null, uploadId };
    },
    async finish(trx, { depositId, params }, { check, mapping }) {
      const { uploadId } = CheckParams.parse(params);
      const row = orNotFound(await uploadsRepository(trx).row(depositId, uploadId), 'upload');
      if (JSON.stringify(mappingOf(row)) !== JSON.stringify(mapping)) throw new AppError(409, 'mapping-changed', 'The mapping was changed while rows were checked with the earlier one: check again.');
      await uploadsRepository(trx).update(trx, uploadId, { file_check: JSON.stringify(check), state: 'checked' });
      return { kind: 'upload', id: uploadId };
    },
  });

  jobs.register<LoadFileInput, LoadFileOutput>('load-file', {
    task: 'load-file',
    async prepare({ id, depositId, params }) {
      const { uploadId, mode } = LoadParams.parse(params);
      const { row, input } = await readInput(depositId, uploadId);
      refuseSecond(row);
      const base = mode === 'add' ? await revisions.currentTable(depositId, mappingOf(row).kind) : undefined;
      return { ...input, baseTableId: base?.table_id ?? null, depositId, uploadId, jobId: id };
    },
    async finish(trx, { depositId, params, startedBy }, { tableId, rows, rowsAdded, check }) {
      const { uploadId, mode } = LoadParams.parse(params);
      // The pool holds one connection, and the transaction has it: read through it too.
      const inside = { uploads: uploadsRepository(trx), revisions: revisionsRepository(trx) };
      const row = orNotFound(await inside.uploads.row(depositId, uploadId), 'upload');
      refuseSecond(row);
      const { kind } = mappingOf(row);
      const base = mode === 'add' ? await inside.revisions.currentTable(depositId, kind) : undefined;
      const number = await inside.revisions.nextNumber(trx, depositId);
      const content = sha256(JSON.stringify([kind, row.sha256, row.mapping, base?.content_sha256 ?? null]));
      const revisionId = await inside.revisions.insertCurrent(trx, {
        deposit_id: depositId, kind, number, upload_id: uploadId, mode, rows, rows_added: rowsAdded, rows_aside: check.rowsAside,
        table_id: tableId, content_sha256: content, loaded_by: startedBy.id, loaded_at: clock().toISOString(),
      });
      await inside.uploads.update(trx, uploadId, { state: 'loaded', file_check: JSON.stringify(check), revision_id: revisionId });
      const sentence = `${startedBy.name} loaded ${kind} revision ${number} from ${row.file_name}: ${inFigures(rowsAdded)} rows, ${inFigures(check.rowsAside)} set aside`;
      await record.add(trx, { actor: startedBy, depositId, action: 'revision.loaded', subject: `revision ${revisionId}`, sentence });
      return { kind: 'revision', id: revisionId };
    },
    async after({ depositId, startedBy }) {
      await enqueueAssembly(jobs, depositId, startedBy);
    },
  });
}
