import { createHash } from 'node:crypto';
import type { Knex } from 'knex';
import type * as z from 'zod';
import { Snapshot } from '#contract/snapshots.ts';
import { AppError } from '#server/lib/errors.ts';
import { revisionsRepository, type RevisionRow } from '#server/modules/intake/revisions.repository.ts';

export interface SnapshotRow {
  id: string;
  deposit_id: number;
  number: number;
  frame_table_id: number;
  surface_rows: number;
  rows: number;
  summary: string;
  revisions: string;
  created_at: string;
}

/** The part of a snapshot that assembly computes; the rest are columns of its row. */
export const SnapshotSummary = Snapshot.omit({ id: true, number: true, createdAt: true, isCurrent: true, frameTableId: true, revisions: true, rows: true, surfaceRows: true });
export type SnapshotSummary = z.infer<typeof SnapshotSummary>;

const RevisionRefs = Snapshot.shape.revisions;

/** A snapshot is what its current revisions hold, so its id is a hash of theirs. */
export function snapshotIdOf(revisions: readonly Pick<RevisionRow, 'kind' | 'content_sha256'>[]): string {
  const parts = revisions.map(({ kind, content_sha256 }) => `${kind} ${content_sha256}`).sort();
  return createHash('sha256').update(parts.join('\n')).digest('hex');
}

const HOLDS_ROWS = ['collar', 'assay', 'surface'];
export const canAssemble = (revisions: readonly Pick<RevisionRow, 'kind'>[]): boolean => revisions.some(({ kind }) => HOLDS_ROWS.includes(kind));

export function createSnapshots(db: Knex) {
  const toSnapshot = (row: SnapshotRow, currentId: string): Snapshot => ({
    ...SnapshotSummary.parse(JSON.parse(row.summary)),
    id: row.id,
    number: row.number,
    createdAt: row.created_at,
    isCurrent: row.id === currentId,
    frameTableId: row.frame_table_id,
    revisions: RevisionRefs.parse(JSON.parse(row.revisions)),
    rows: row.rows,
    surfaceRows: row.surface_rows,
  });

  /** Id of the snapshot the current revisions make, assembled or not. */
  async function currentId(depositId: number, trx: Knex = db): Promise<string> {
    return snapshotIdOf(await revisionsRepository(trx).current(depositId));
  }

  async function row(depositId: number, snapshotId: string, trx: Knex = db): Promise<SnapshotRow | undefined> {
    return trx<SnapshotRow>('snapshots').where({ deposit_id: depositId, id: snapshotId }).first();
  }

  /** The snapshot of the current revisions, else the newest there is. */
  async function latest(depositId: number, trx: Knex = db): Promise<Snapshot | null> {
    const id = await currentId(depositId, trx);
    const found = (await row(depositId, id, trx)) ?? (await trx<SnapshotRow>('snapshots').where({ deposit_id: depositId }).orderBy('number', 'desc').first());
    return found ? toSnapshot(found, id) : null;
  }

  return {
    currentId,
    row,
    latest,

    async find(depositId: number, snapshotId: string): Promise<Snapshot | null> {
      const found = await row(depositId, snapshotId);
      return found ? toSnapshot(found, await currentId(depositId)) : null;
    },

    /** What a new analysis runs on; refuses while tables are still being put together. */
    async ready(depositId: number): Promise<Snapshot> {
      const snapshot = await latest(depositId);
      if (!snapshot) throw new AppError(409, 'no-snapshot', 'Expected loaded tables to analyse, found none: bring in assays first.');
      if (!snapshot.isCurrent) throw new AppError(409, 'snapshot-assembling', 'The tables just loaded are still being put together; try again in a moment.');
      return snapshot;
    },

    async numbers(depositId: number, trx: Knex = db): Promise<Map<string, number>> {
      const rows = await trx<SnapshotRow>('snapshots').where({ deposit_id: depositId }).select('id', 'number');
      return new Map(rows.map(({ id, number }) => [id, number]));
    },
  };
}
export type SnapshotsService = ReturnType<typeof createSnapshots>;
