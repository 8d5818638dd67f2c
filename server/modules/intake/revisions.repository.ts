import type { Knex } from 'knex';
import type { Revision, TableKind } from '#contract/files.ts';

export interface RevisionRow {
  id: number;
  deposit_id: number;
  kind: TableKind;
  number: number;
  upload_id: number;
  mode: 'replace' | 'add';
  is_current: number;
  rows: number;
  rows_added: number;
  rows_aside: number;
  table_id: number;
  content_sha256: string;
  loaded_by: number;
  loaded_at: string;
}

interface NamedRevisionRow extends RevisionRow {
  loaded_by_name: string;
  file_name: string;
}

const toRevision = (row: NamedRevisionRow): Revision => ({
  id: row.id,
  kind: row.kind,
  number: row.number,
  fileName: row.file_name,
  uploadId: row.upload_id,
  mode: row.mode,
  isCurrent: row.is_current === 1,
  rows: row.rows,
  rowsAdded: row.rows_added,
  rowsAside: row.rows_aside,
  tableId: row.table_id,
  loadedBy: { id: row.loaded_by, name: row.loaded_by_name },
  loadedAt: row.loaded_at,
});

export function revisionsRepository(db: Knex) {
  const named = (depositId: number) =>
    db<NamedRevisionRow>('revisions')
      .join('users', 'users.id', 'revisions.loaded_by')
      .join('uploads', 'uploads.id', 'revisions.upload_id')
      .where('revisions.deposit_id', depositId)
      .select<NamedRevisionRow[]>('revisions.*', 'users.name as loaded_by_name', 'uploads.file_name');

  return {
    async list(depositId: number): Promise<Revision[]> {
      const rows: NamedRevisionRow[] = await named(depositId).orderBy('revisions.number', 'desc');
      return rows.map(toRevision);
    },
    async find(depositId: number, revisionId: number): Promise<Revision | null> {
      const row: NamedRevisionRow | undefined = await named(depositId).where('revisions.id', revisionId).first();
      return row ? toRevision(row) : null;
    },
    current: (depositId: number): Promise<RevisionRow[]> => db<RevisionRow>('revisions').where({ deposit_id: depositId, is_current: 1 }).orderBy('kind'),
    async currentTable(depositId: number, kind: TableKind): Promise<RevisionRow | undefined> {
      return db<RevisionRow>('revisions').where({ deposit_id: depositId, kind, is_current: 1 }).first();
    },
    async nextNumber(trx: Knex, depositId: number): Promise<number> {
      const [largest] = await trx<RevisionRow>('revisions').where({ deposit_id: depositId }).max<{ number: number | null }[]>({ number: 'number' });
      return (largest?.number ?? 0) + 1;
    },
    async insertCurrent(trx: Knex, row: Omit<RevisionRow, 'id' | 'is_current'>): Promise<number> {
      await trx<RevisionRow>('revisions').where({ deposit_id: row.deposit_id, kind: row.kind, is_current: 1 }).update({ is_current: 0 });
      const [made] = await trx<RevisionRow>('revisions').insert({ ...row, is_current: 1 }).returning('id');
      return made?.id ?? 0;
    },
    async makeCurrent(trx: Knex, { deposit_id, kind, id }: Pick<RevisionRow, 'deposit_id' | 'kind' | 'id'>): Promise<void> {
      await trx<RevisionRow>('revisions').where({ deposit_id, kind, is_current: 1 }).update({ is_current: 0 });
      await trx<RevisionRow>('revisions').where({ id }).update({ is_current: 1 });
    },
  };
}
export type RevisionsRepository = ReturnType<typeof revisionsRepository>;
