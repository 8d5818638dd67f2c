import { randomBytes } from 'node:crypto';
import { rm } from 'node:fs/promises';
import type { Knex } from 'knex';
import type { FileMapping, PreviewRow, Revision, RowProblem, Upload } from '#contract/files.ts';
import type { JobStarted } from '#contract/jobs.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { transact } from '#server/db/transact.ts';
import type { Actor } from '#server/lib/actor.ts';
import type { Clock } from '#server/lib/clock.ts';
import { toCsv } from '#server/lib/csv.ts';
import { AppError, orNotFound } from '#server/lib/errors.ts';
import { inFigures } from '#server/lib/figures.ts';
import type { JobsService } from '#server/modules/jobs/jobs.service.ts';
import type { RecordService } from '#server/modules/record/record.service.ts';
import { enqueueAssembly } from '#server/modules/snapshots/enqueue-assembly.ts';
import { planColumns } from '#workers/intake/column-plan.ts';
import type { Compute } from '#workers/client.ts';
import type { InspectFileInput, InspectFileOutput } from '#workers/tasks/inspect-file.ts';
import type { PreviewFileInput } from '#workers/tasks/preview-file.ts';
import type { FileStore } from './file-store.ts';
import { cleanFileName } from './receive-files.ts';
import { LOADED_ALREADY, mappingOf, type UploadRow, type UploadsRepository } from './uploads.repository.ts';
import type { RevisionsRepository } from './revisions.repository.ts';

export interface ReceivedFile {
  path: string;
  originalname: string;
  size: number;
}

export interface IntakeDeps {
  db: Knex;
  clock: Clock;
  compute: Compute;
  jobs: JobsService;
  record: RecordService;
  files: FileStore;
  uploads: UploadsRepository;
  revisions: RevisionsRepository;
}

/** Space one deposit's uploads may take. */
const QUOTA_BYTES = 20 * 1024 ** 3;
const PROBLEM_CSV_ROWS = 50_000;

/** A remembered mapping for a file with the same header that is divided otherwise. */
function asWritten(remembered: FileMapping, { delimiter, decimalMark }: FileMapping): FileMapping {
  return remembered.delimiter === delimiter ? remembered : { ...remembered, delimiter, decimalMark };
}

export function createIntake({ db, clock, compute, jobs, record, files, uploads, revisions }: IntakeDeps) {
  const rowOf = async (depositId: number, uploadId: number): Promise<UploadRow> => orNotFound(await uploads.row(depositId, uploadId), 'upload');
  const get = async (depositId: number, uploadId: number): Promise<Upload> => orNotFound(await uploads.find(depositId, uploadId), 'upload');

  /** The upload, when it is neither loaded nor about to be. */
  async function openRow(depositId: number, uploadId: number, isLoaded: string): Promise<UploadRow> {
    const row = await rowOf(depositId, uploadId);
    if (row.state === 'loaded') throw new AppError(409, 'upload-loaded', isLoaded);
    if (await uploads.isLoading(depositId, uploadId)) {
      throw new AppError(409, 'upload-busy', 'This file is being loaded: wait for it to end, or cancel it first.');
    }
    return row;
  }

  async function receiveOne(depositId: number, file: ReceivedFile, actor: Actor): Promise<number> {
    const fileName = cleanFileName(file.originalname);
    const inspected = await compute.run<InspectFileInput, InspectFileOutput>('inspect-file', { path: file.path, fileName, sizeBytes: file.size });
    const storedName = randomBytes(16).toString('hex');
    const { sha256 } = await files.keep(file.path, storedName);
    const earlier = await uploads.remembered(depositId, inspected.headerSignature);
    const mapping = earlier ? asWritten(mappingOf(earlier), inspected.mapping) : inspected.mapping;
    return transact(db, async (trx) => {
      const id = await uploads.insert(trx, {
        deposit_id: depositId, file_name: fileName, stored_name: storedName, size_bytes: file.size, sha256, uploaded_by: actor.id, uploaded_at: clock().toISOString(),
        state: 'mapped', encoding: inspected.encoding, row_count: inspected.rowCount, guess: JSON.stringify(inspected.guess), header_signature: inspected.headerSignature,
        mapping: JSON.stringify(mapping), mapping_remembered: earlier ? 1 : 0, file_check: null, revision_id: null,
      });
      await record.add(trx, { actor, depositId, action: 'upload.received', subject: `upload ${id}`, sentence: `${actor.name} brought in ${fileName}, ${inFigures(inspected.rowCount)} rows` });
      return id;
    });
  }

  return {
    list: (depositId: number): Promise<Upload[]> => uploads.list(depositId),
    get,
    revisions: (depositId: number): Promise<Revision[]> => revisions.list(depositId),

    /** Files that cannot be read are refused one by one; the others are kept. */
    async receive(depositId: number, received: readonly ReceivedFile[], actor: Actor) {
      if (received.length === 0) throw new AppError(400, 'no-files', 'Expected at least one file in the field “files”, found none.');
      const bytes = received.reduce((sum, { size }) => sum + size, 0);
      const refused: { fileName: string; message: string }[] = [];
      const made: Upload[] = [];
      try {
        if ((await uploads.bytesStored(depositId)) + bytes > QUOTA_BYTES) {
          throw new AppError(413, 'quota', 'This deposit’s uploads have reached 20 GiB; discard some first.');
        }
        for (const file of received) {
          try {
            made.push(await get(depositId, await receiveOne(depositId, file, actor)));
          } catch (error) {
            if (!(error instanceof KernelError)) throw error;
            refused.push({ fileName: cleanFileName(file.originalname), message: error.message });
          }
        }
      } finally {
        await Promise.all(received.map(({ path }) => rm(path, { force: true })));
      }
      return { uploads: made, refused };
    },

    async path(depositId: number, uploadId: number) {
      const { stored_name, file_name } = await rowOf(depositId, uploadId);
      return { path: files.pathOf(stored_name), fileName: file_name };
    },

    async discard(depositId: number, uploadId: number, actor: Actor) {
      const row = await openRow(depositId, uploadId, 'A loaded file is kept: revisions stand on it.');
      await transact(db, async (trx) => {
        await uploads.update(trx, uploadId, { state: 'discarded' });
        await record.add(trx, { actor, depositId, action: 'upload.discarded', subject: `upload ${uploadId}`, sentence: `${actor.name} discarded ${row.file_name}` });
      });
      await files.remove(row.stored_name);
      return { done: true as const };
    },

    async saveMapping(depositId: number, uploadId: number, mapping: FileMapping): Promise<Upload> {
      await openRow(depositId, uploadId, 'This file is loaded; upload it again to read it another way.');
      planColumns(mapping);
      await uploads.update(db, uploadId, { mapping: JSON.stringify(mapping), state: 'mapped', file_check: null });
      return get(depositId, uploadId);
    },

    async preview(depositId: number, uploadId: number, mapping: FileMapping, rows: number) {
      const { stored_name, encoding } = await rowOf(depositId, uploadId);
      planColumns(mapping);
      const collars = await revisions.currentTable(depositId, 'collar');
      const input = { path: files.pathOf(stored_name), encoding, mapping, rows, collarTableId: collars?.table_id ?? null };
      const preview = await compute.run<PreviewFileInput, PreviewRow[]>('preview-file', input);
      const shown = mapping.columns.filter(({ role }) => role !== 'skip');
      const columns = shown.map(({ index, role, analyte, oxide, unit, header }) => ({
        index, label: oxide ?? analyte ?? (role === 'note' ? header : role.replaceAll('-', ' ')), unit: role === 'analyte' ? unit : unitOf(role), isNumber: role === 'analyte' || unitOf(role) !== null,
      }));
      return { columns, rows: preview };
    },

    async check(depositId: number, uploadId: number, actor: Actor): Promise<JobStarted> {
      const row = await rowOf(depositId, uploadId);
      planColumns(mappingOf(row));
      return { job: await jobs.enqueue({ depositId, kind: 'check-file', title: `Check ${row.file_name}`, params: { uploadId }, actor }) };
    },

    async load(depositId: number, uploadId: number, mode: 'replace' | 'add', actor: Actor): Promise<JobStarted> {
      const row = await openRow(depositId, uploadId, LOADED_ALREADY);
      planColumns(mappingOf(row));
      return { job: await jobs.enqueue({ depositId, kind: 'load-file', title: `Load ${row.file_name}`, params: { uploadId, mode }, actor }) };
    },

    async problems(depositId: number, uploadId: number, query: { page: number; pageSize: number; severity?: RowProblem['severity'] | undefined; code?: string | undefined }) {
      await rowOf(depositId, uploadId);
      const { page, pageSize, ...only } = query;
      const [total, rows] = await Promise.all([uploads.countProblems(uploadId, only), uploads.problems(uploadId, only, pageSize, (page - 1) * pageSize)]);
      return { rows, total, page, pageSize };
    },

    async problemsCsv(depositId: number, uploadId: number): Promise<{ fileName: string; csv: string }> {
      const { file_name } = await rowOf(depositId, uploadId);
      const rows = await uploads.problems(uploadId, {}, PROBLEM_CSV_ROWS, 0);
      const header = ['row', 'severity', 'column', 'value', 'problem', 'reason', 'original_row'];
      const csv = toCsv(header, rows.map((row) => [row.row, row.severity, row.column, row.value, row.code, row.message, row.original]));
      return { fileName: `problems-of-${file_name}`, csv };
    },

    async useRevision(depositId: number, revisionId: number, actor: Actor): Promise<Revision> {
      const revision = orNotFound(await revisions.find(depositId, revisionId), 'revision');
      if (!revision.isCurrent) {
        await transact(db, async (trx) => {
          await revisions.makeCurrent(trx, { deposit_id: depositId, kind: revision.kind, id: revisionId });
          const sentence = `${actor.name} made revision ${revision.number} (${revision.fileName}) the current ${revision.kind} table`;
          await record.add(trx, { actor, depositId, action: 'revision.used', subject: `revision ${revisionId}`, sentence });
        });
        await enqueueAssembly(jobs, depositId, actor);
      }
      return orNotFound(await revisions.find(depositId, revisionId), 'revision');
    },
  };
}
export type IntakeService = ReturnType<typeof createIntake>;

const ANGLES = ['azimuth', 'dip', 'dip-direction', 'alpha', 'beta'];
const METRES = ['from', 'to', 'depth', 'x', 'y', 'z', 'length'];
const unitOf = (role: string): string | null => (METRES.includes(role) ? 'm' : ANGLES.includes(role) ? '°' : null);
