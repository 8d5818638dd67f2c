import type { Knex } from 'knex';
import type { Clock } from '#server/lib/clock.ts';
import { revisionsRepository, type RevisionRow } from '#server/modules/intake/revisions.repository.ts';
import { mappingOf, type UploadRow } from '#server/modules/intake/uploads.repository.ts';
import type { JobsService } from '#server/modules/jobs/jobs.service.ts';
import type { AssembleInput, AssembleOutput } from '#workers/tasks/assemble.ts';
import { canAssemble, snapshotIdOf, type SnapshotRow, type SnapshotsService } from './snapshots.service.ts';

interface Deps {
  db: Knex;
  clock: Clock;
  jobs: JobsService;
  snapshots: SnapshotsService;
}

/** Registers putting the current revisions together as a job. Doing it twice does no harm: ids are hashes. */
export function registerAssembly({ db, clock, jobs, snapshots }: Deps): void {
  /** Which line beta was read from goes with the structure table in force. */
  async function referenceLineOf(revisions: readonly RevisionRow[]): Promise<'bottom' | 'top'> {
    const structure = revisions.find(({ kind }) => kind === 'structure');
    const upload = structure && (await db<UploadRow>('uploads').where({ id: structure.upload_id }).first());
    return upload ? mappingOf(upload).referenceLine : 'bottom';
  }

  jobs.register<AssembleInput, AssembleOutput | null>('assemble', {
    task: 'assemble',
    async prepare({ id, depositId }) {
      const revisions = await revisionsRepository(db).current(depositId);
      const snapshotId = snapshotIdOf(revisions);
      const isDone = !canAssemble(revisions) || (await snapshots.row(depositId, snapshotId)) !== undefined;
      const tables = Object.fromEntries(revisions.map(({ kind, table_id }) => [kind, table_id]));
      const refs = revisions.map(({ kind, id: revisionId, number, rows }) => ({ kind, revisionId, number, rows }));
      return { depositId, jobId: id, snapshotId, isDone, tables, refs, referenceLine: await referenceLineOf(revisions) };
    },
    async finish(trx, { depositId }, output) {
      if (output === null) return { kind: 'snapshot', id: await snapshots.currentId(depositId, trx) };
      const [largest] = await trx<SnapshotRow>('snapshots').where({ deposit_id: depositId }).max<{ number: number | null }[]>({ number: 'number' });
      await trx<SnapshotRow>('snapshots').insert({
        id: output.snapshotId, deposit_id: depositId, number: (largest?.number ?? 0) + 1, frame_table_id: output.frameTableId, rows: output.rows,
        surface_rows: output.surfaceRows, summary: JSON.stringify(output.summary), revisions: JSON.stringify(output.refs), created_at: clock().toISOString(),
      });
      return { kind: 'snapshot', id: output.snapshotId };
    },
  });
}
