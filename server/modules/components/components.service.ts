import type { Knex } from 'knex';
import * as z from 'zod';
import { Id } from '#contract/common.ts';
import type { ComponentRun } from '#contract/components.ts';
import type { JobStarted } from '#contract/jobs.ts';
import type { Actor } from '#server/lib/actor.ts';
import type { Clock } from '#server/lib/clock.ts';
import { orNotFound } from '#server/lib/errors.ts';
import { inFigures } from '#server/lib/figures.ts';
import type { JobsService } from '#server/modules/jobs/jobs.service.ts';
import type { RecordService } from '#server/modules/record/record.service.ts';
import { tablesOf } from '#server/modules/snapshots/snapshot-tables.ts';
import type { SnapshotsService } from '#server/modules/snapshots/snapshots.service.ts';
import type { SuitesService } from '#server/modules/suites/suites.service.ts';
import type { ComponentsInput, ComponentsOutput } from '#workers/tasks/components.ts';
import { componentsRepository } from './components.repository.ts';

export interface AnalysisDeps {
  db: Knex;
  clock: Clock;
  jobs: JobsService;
  record: RecordService;
  snapshots: SnapshotsService;
}

const Params = z.strictObject({ suiteId: Id, snapshotId: z.string(), seed: z.number().int() });

export function createComponents({ db, clock, jobs, record, snapshots }: AnalysisDeps, suites: SuitesService) {
  const repository = componentsRepository(db);

  jobs.register<ComponentsInput, ComponentsOutput>('components', {
    task: 'components',
    async prepare({ id, depositId, params }) {
      const { suiteId, snapshotId, seed } = Params.parse(params);
      const suite = await suites.get(depositId, suiteId);
      const snapshot = orNotFound(await snapshots.find(depositId, snapshotId), 'snapshot');
      const { analytes, support, replacementFraction } = suite;
      return { depositId, jobId: id, tables: tablesOf(snapshot), support, analytes, replacementFraction, seed };
    },
    async finish(trx, { depositId, params, startedBy }, { tableId, result }) {
      const { suiteId, snapshotId, seed } = Params.parse(params);
      const runId = await componentsRepository(trx).insert({
        deposit_id: depositId, created_by: startedBy.id, created_at: clock().toISOString(), suite_id: suiteId, snapshot_id: snapshotId, table_id: tableId, seed, result: JSON.stringify(result),
      });
      const sentence = `${startedBy.name} ran components on ${result.parts.length} analytes of ${inFigures(result.nFit + result.nScoredOnly)} rows`;
      await record.add(trx, { actor: startedBy, depositId, action: 'components.run', subject: `component run ${runId}`, sentence });
      return { kind: 'component-run', id: runId };
    },
  });

  return {
    list: async (depositId: number): Promise<ComponentRun[]> => repository.list(depositId, await snapshots.currentId(depositId)),
    get: async (depositId: number, runId: number): Promise<ComponentRun> => orNotFound(await repository.find(depositId, runId, await snapshots.currentId(depositId)), 'component run'),
    async start(depositId: number, { suiteId, seed }: { suiteId: number; seed: number }, actor: Actor): Promise<JobStarted> {
      const suite = await suites.get(depositId, suiteId);
      const snapshot = await snapshots.ready(depositId);
      const title = `Find components of “${suite.name}”`;
      return { job: await jobs.enqueue({ depositId, kind: 'components', title, params: { suiteId, snapshotId: snapshot.id, seed }, actor }) };
    },
  };
}
export type ComponentsService = ReturnType<typeof createComponents>;
