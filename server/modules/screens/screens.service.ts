import * as z from 'zod';
import { Id } from '#contract/common.ts';
import type { JobStarted } from '#contract/jobs.ts';
import type { CellDetail, Screen } from '#contract/screens.ts';
import type { Actor } from '#server/lib/actor.ts';
import { AppError, orNotFound } from '#server/lib/errors.ts';
import type { AnalysisDeps } from '#server/modules/components/components.service.ts';
import type { GroupingsService } from '#server/modules/groupings/groupings.service.ts';
import { chunksOf } from '#server/modules/jobs/run-parts.ts';
import { tablesOf } from '#server/modules/snapshots/snapshot-tables.ts';
import type { ScreenInput, ScreenOutput } from '#workers/tasks/screen.ts';
import { findingOf } from './finding.ts';
import { screensRepository } from './screens.repository.ts';

const Params = z.strictObject({
  support: z.enum(['drill', 'surface']), variables: z.array(z.string()), groupingId: Id.nullable(), subsets: z.array(z.enum(['group', 'lithology', 'weathering'])), snapshotId: z.string(),
});
type StartBody = Omit<z.infer<typeof Params>, 'snapshotId'>;

export function createScreens({ db, clock, jobs, record, snapshots }: AnalysisDeps, groupings: GroupingsService) {
  const repository = screensRepository(db);

  jobs.register<ScreenInput, ScreenOutput>('screen', {
    task: 'screen',
    async prepare({ depositId, params }) {
      const { support, variables, groupingId, subsets, snapshotId } = Params.parse(params);
      const snapshot = orNotFound(await snapshots.find(depositId, snapshotId), 'snapshot');
      const grouping = groupingId === null ? null : await groupings.get(depositId, groupingId);
      const groups = grouping?.groups.map(({ label, name, slot }) => ({ label, name, slot })) ?? [];
      return { tables: tablesOf(snapshot), support, variables, subsets, groupingTableId: grouping?.tableId ?? null, groups };
    },
    // A thread per run of variables: every cell is judged by itself.
    parts: {
      split: (input, count) => chunksOf(input.variables, count).map((variables) => ({ ...input, variables })),
      join: (outputs) => ({ variables: outputs.flatMap(({ variables }) => variables), subsets: outputs[0].subsets, cells: outputs.flatMap(({ cells }) => cells) }),
    },
    async finish(trx, { depositId, params, startedBy }, { cells, ...matrix }) {
      const result = { ...matrix, finding: findingOf(cells, matrix.subsets) };
      const { support, groupingId, snapshotId } = Params.parse(params);
      const id = await screensRepository(trx).insert(
        { deposit_id: depositId, created_by: startedBy.id, created_at: clock().toISOString(), grouping_id: groupingId, snapshot_id: snapshotId, support, result: JSON.stringify({ ...result, cells }) },
        cells,
      );
      await record.add(trx, { actor: startedBy, depositId, action: 'screen.run', subject: `screen ${id}`, sentence: `${startedBy.name} screened ${result.variables.join(', ')} in ${result.subsets.length} subsets` });
      return { kind: 'screen', id };
    },
  });

  const get = async (depositId: number, screenId: number): Promise<Screen> =>
    orNotFound(await repository.find(depositId, screenId, await snapshots.currentId(depositId)), 'screen');

  return {
    get,
    list: async (depositId: number): Promise<Screen[]> => repository.list(depositId, await snapshots.currentId(depositId)),
    async cell(depositId: number, screenId: number, subset: string, variable: string): Promise<CellDetail> {
      await get(depositId, screenId);
      return orNotFound(await repository.cell(screenId, subset, variable), 'cell');
    },
    async start(depositId: number, body: StartBody, actor: Actor): Promise<JobStarted> {
      const snapshot = await snapshots.ready(depositId);
      const known = new Set(snapshot.analytes.filter(({ supports }) => supports.includes(body.support)).map(({ analyte }) => analyte));
      const unknown = body.variables.filter((variable) => !known.has(variable));
      if (unknown.length > 0) {
        const message = `expected loaded analytes, found ${unknown.join(', ')}`;
        throw new AppError(400, 'unknown-analyte', `Variables: ${message}.`, { fields: [{ path: 'body.variables', message }] });
      }
      if (body.groupingId !== null) {
        const grouping = await groupings.get(depositId, body.groupingId);
        if (grouping.snapshotId !== snapshot.id) throw new AppError(409, 'grouping-stale', `“${grouping.name}” stands on snapshot ${grouping.snapshotNumber}; group again on snapshot ${snapshot.number} before screening.`);
      }
      const title = `Screen ${body.variables.join(', ')} for mixed populations`;
      return { job: await jobs.enqueue({ depositId, kind: 'screen', title, params: { ...body, snapshotId: snapshot.id }, actor }) };
    },
  };
}
export type ScreensService = ReturnType<typeof createScreens>;
