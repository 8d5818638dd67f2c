import type { Knex } from 'knex';
import * as z from 'zod';
import { ColumnGuess, FileCheck, FileMapping, type RowProblem, type Upload } from '#contract/files.ts';
import { WAITING } from '#server/modules/jobs/jobs.repository.ts';
import type { InspectFileOutput } from '#workers/tasks/inspect-file.ts';

export interface UploadRow {
  id: number;
  deposit_id: number;
  file_name: string;
  stored_name: string;
  size_bytes: number;
  sha256: string;
  uploaded_by: number;
  uploaded_at: string;
  state: 'mapped' | 'checked' | 'loaded' | 'discarded';
  encoding: InspectFileOutput['encoding'];
  row_count: number;
  guess: string;
  header_signature: string;
  mapping: string;
  mapping_remembered: number;
  file_check: string | null;
  revision_id: number | null;
}

interface NamedUploadRow extends UploadRow {
  uploaded_by_name: string;
}

const Guesses = z.array(ColumnGuess);

export const mappingOf = (row: Pick<UploadRow, 'mapping'>): FileMapping => FileMapping.parse(JSON.parse(row.mapping));

const toUpload = (row: NamedUploadRow): Upload => ({
  id: row.id,
  fileName: row.file_name,
  sizeBytes: row.size_bytes,
  sha256: row.sha256,
  uploadedBy: { id: row.uploaded_by, name: row.uploaded_by_name },
  uploadedAt: row.uploaded_at,
  state: row.state === 'discarded' ? 'mapped' : row.state,
  encoding: row.encoding,
  rowCount: row.row_count,
  guess: Guesses.parse(JSON.parse(row.guess)),
  mapping: mappingOf(row),
  mappingRemembered: row.mapping_remembered === 1,
  check: row.file_check === null ? null : FileCheck.parse(JSON.parse(row.file_check)),
  revisionId: row.revision_id,
});

export const LOADED_ALREADY = 'This file is loaded already.';
const LIST_LIMIT = 200;

export function uploadsRepository(db: Knex) {
  const named = (depositId: number) =>
    db<NamedUploadRow>('uploads')
      .join('users', 'users.id', 'uploads.uploaded_by')
      .where('uploads.deposit_id', depositId)
      .whereNot('uploads.state', 'discarded')
      .select<NamedUploadRow[]>('uploads.*', 'users.name as uploaded_by_name');

  const problems = (uploadId: number, only: { severity?: RowProblem['severity'] | undefined; code?: string | undefined }) => {
    const query = db<RowProblem & { id: number; upload_id: number; original: string }>('row_problems').where({ upload_id: uploadId });
    if (only.severity) void query.where({ severity: only.severity });
    if (only.code) void query.where({ code: only.code });
    return query;
  };

  return {
    async list(depositId: number): Promise<Upload[]> {
      const rows: NamedUploadRow[] = await named(depositId).orderBy('uploads.id', 'desc').limit(LIST_LIMIT);
      return rows.map(toUpload);
    },
    async find(depositId: number, uploadId: number): Promise<Upload | null> {
      const row: NamedUploadRow | undefined = await named(depositId).where('uploads.id', uploadId).first();
      return row ? toUpload(row) : null;
    },
    row: (depositId: number, uploadId: number): Promise<UploadRow | undefined> =>
      db<UploadRow>('uploads').where({ deposit_id: depositId, id: uploadId }).whereNot('state', 'discarded').first(),
    async insert(trx: Knex.Transaction, row: Omit<UploadRow, 'id'>): Promise<number> {
      const [made] = await trx<UploadRow>('uploads').insert(row).returning('id');
      return made?.id ?? 0;
    },
    update: (trx: Knex, uploadId: number, change: Partial<UploadRow>) => trx<UploadRow>('uploads').where({ id: uploadId }).update(change),
    /** The mapping last saved in this deposit for a file with the same header. */
    remembered: (depositId: number, headerSignature: string): Promise<UploadRow | undefined> =>
      db<UploadRow>('uploads').where({ deposit_id: depositId, header_signature: headerSignature, state: 'loaded' }).orderBy('id', 'desc').first(),
    /** Is a load of it waiting or running? */
    async isLoading(depositId: number, uploadId: number): Promise<boolean> {
      const job: unknown = await db('jobs').where({ deposit_id: depositId, kind: 'load-file' }).whereIn('state', [...WAITING, 'running'])
        .whereRaw("json_extract(params, '$.uploadId') = ?", [uploadId]).first('id');
      return job !== undefined;
    },
    async bytesStored(depositId: number): Promise<number> {
      const [sum] = await db<UploadRow>('uploads').where({ deposit_id: depositId }).sum<{ bytes: number | null }[]>({ bytes: 'size_bytes' });
      return sum?.bytes ?? 0;
    },
    async countProblems(uploadId: number, only: Parameters<typeof problems>[1]): Promise<number> {
      const [counted] = await problems(uploadId, only).count<{ total: number }[]>({ total: '*' });
      return counted?.total ?? 0;
    },
    problems: (uploadId: number, only: Parameters<typeof problems>[1], limit: number, offset: number) =>
      problems(uploadId, only).orderBy('row').orderBy('id').limit(limit).offset(offset).select('row', 'column', 'value', 'code', 'message', 'severity', 'original'),
  };
}
export type UploadsRepository = ReturnType<typeof uploadsRepository>;
