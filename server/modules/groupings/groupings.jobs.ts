import { orNotFound } from '#server/lib/errors.ts';
import { inFigures } from '#server/lib/figures.ts';
import type { AnalysisDeps, ComponentsService } from '#server/modules/components/components.service.ts';
import { tablesOf } from '#server/modules/snapshots/snapshot-tables.ts';
import type { GroupingInput, GroupingOutput } from '#workers/tasks/grouping.ts';
import type { SweepInput, SweepOutput } from '#workers/tasks/sweep.ts';
import { GroupingParams, SweepParams } from './groupings.params.ts';
import { groupingsRepository } from './groupings.repository.ts';


/** Registers sweeps and groupings as jobs. The first grouping of a deposit becomes the one domains stand on. */
export function registerGroupingJobs({ clock, jobs, record, snapshots }: AnalysisDeps, components: ComponentsService): void {
  async function runWithTables(depositId: number, componentRunId: number) {
    const run = await components.get(depositId, componentRunId);
    const snapshot = orNotFound(await snapshots.find(depositId, run.snapshotId), 'snapshot');
    return { run, tables: tablesOf(snapshot) };
  }

  jobs.register<SweepInput, SweepOutput>('sweep', {
    task: 'sweep',
    async prepare({ depositId, params }) {
      const { componentRunId, components: kept, kFrom, kTo, seed } = SweepParams.parse(params);
      const { run, tables } = await runWithTables(depositId, componentRunId);
      return { componentTableId: run.tableId, tables, support: run.support, components: kept, kFrom, kTo, seed };
    },
    async finish(trx, { depositId, params, startedBy }, result) {
      const { componentRunId, components: kept, seed } = SweepParams.parse(params);
      const id = await groupingsRepository(trx).insertSweep({
        deposit_id: depositId, created_by: startedBy.id, created_at: clock().toISOString(), component_run_id: componentRunId, components: kept, seed, result: JSON.stringify(result),
      });
      return { kind: 'sweep', id };
    },
  });

  jobs.register<GroupingInput, GroupingOutput>('grouping', {
    task: 'grouping',
    async prepare({ id, depositId, params }) {
      const { componentRunId, components: kept, k, seed } = GroupingParams.parse(params);
      const { run, tables } = await runWithTables(depositId, componentRunId);
      return { depositId, jobId: id, componentTableId: run.tableId, tables, support: run.support, parts: run.parts, replacementFraction: run.replacementFraction, components: kept, k, seed };
    },
    async finish(trx, { depositId, params, startedBy }, { tableId, result }) {
      const { componentRunId, components: kept, k, seed, name } = GroupingParams.parse(params);
      const repository = groupingsRepository(trx);
      const [standing] = await trx('groupings').where({ deposit_id: depositId, is_active: 1 }).count<{ total: number }[]>({ total: '*' });
      const id = await repository.insert(
        {
          deposit_id: depositId, created_by: startedBy.id, created_at: clock().toISOString(), name: name ?? `${k} groups on ${kept} components`, component_run_id: componentRunId,
          table_id: tableId, k, components: kept, seed, is_active: (standing?.total ?? 0) === 0 ? 1 : 0, result: JSON.stringify(result),
        },
        result.groups.map(({ label, intervals, metres }) => ({ label, name: `Group ${label}`, slot: label, intervals, metres, version: 1 })),
      );
      await record.add(trx, { actor: startedBy, depositId, action: 'grouping.run', subject: `grouping ${id}`, sentence: `${startedBy.name} grouped ${inFigures(result.n)} rows into ${k}` });
      return { kind: 'grouping', id };
    },
  });
}
