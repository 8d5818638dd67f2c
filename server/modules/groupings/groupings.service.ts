import type { Group, Grouping, Sweep } from '#contract/groupings.ts';
import type { JobStarted } from '#contract/jobs.ts';
import { transact } from '#server/db/transact.ts';
import type { Actor } from '#server/lib/actor.ts';
import { AppError, orNotFound, staleVersion } from '#server/lib/errors.ts';
import type { AnalysisDeps, ComponentsService } from '#server/modules/components/components.service.ts';
import { registerGroupingJobs } from './groupings.jobs.ts';
import type { GroupingParams, SweepParams } from './groupings.params.ts';
import { groupingsRepository } from './groupings.repository.ts';

export function createGroupings(deps: AnalysisDeps, components: ComponentsService) {
  const { db, jobs, record, snapshots } = deps;
  const repository = groupingsRepository(db);
  registerGroupingJobs(deps, components);

  const get = async (depositId: number, groupingId: number): Promise<Grouping> =>
    orNotFound(await repository.find(depositId, groupingId, await snapshots.currentId(depositId)), 'grouping');

  async function checkComponents(depositId: number, { componentRunId, components: kept }: { componentRunId: number; components: number }) {
    const run = await components.get(depositId, componentRunId);
    if (kept > run.stored) {
      const message = `expected at most ${run.stored} components, found ${kept}`;
      throw new AppError(400, 'too-many-components', `Components: ${message}.`, { fields: [{ path: 'body.components', message }] });
    }
    return run;
  }

  return {
    get,
    list: async (depositId: number): Promise<Grouping[]> => repository.list(depositId, await snapshots.currentId(depositId)),
    sweeps: async (depositId: number): Promise<Sweep[]> => repository.sweeps(depositId, await snapshots.currentId(depositId)),
    /** The grouping candidate domains stand on; null before the first. */
    active: async (depositId: number): Promise<Grouping | null> => repository.active(depositId, await snapshots.currentId(depositId)),

    async startSweep(depositId: number, params: SweepParams, actor: Actor): Promise<JobStarted> {
      await checkComponents(depositId, params);
      const title = `Try ${params.kFrom} to ${params.kTo} groups on ${params.components} components`;
      return { job: await jobs.enqueue({ depositId, kind: 'sweep', title, params, actor }) };
    },

    async start(depositId: number, params: GroupingParams, actor: Actor): Promise<JobStarted> {
      await checkComponents(depositId, params);
      const title = `Group into ${params.k} on ${params.components} components`;
      return { job: await jobs.enqueue({ depositId, kind: 'grouping', title, params, actor }) };
    },

    async use(depositId: number, groupingId: number, actor: Actor): Promise<Grouping> {
      const grouping = await get(depositId, groupingId);
      if (grouping.isActive) return grouping;
      const [standing] = await db('domains').where({ deposit_id: depositId }).whereNull('deleted_at').whereNot({ grouping_id: groupingId }).count<{ total: number }[]>({ total: '*' });
      if ((standing?.total ?? 0) > 0) {
        throw new AppError(409, 'domains-stand-elsewhere', `${standing?.total} candidate domains stand on another grouping: take them back first.`);
      }
      await transact(db, async (trx) => {
        await groupingsRepository(trx).activate(depositId, groupingId);
        await record.add(trx, { actor, depositId, action: 'grouping.used', subject: `grouping ${groupingId}`, sentence: `${actor.name} lets domains stand on grouping “${grouping.name}”` });
      });
      return get(depositId, groupingId);
    },

    async updateGroup(depositId: number, groupingId: number, label: number, change: { name?: string | undefined; slot?: number | undefined }, expectedVersion: number, actor: Actor): Promise<Group> {
      const grouping = await get(depositId, groupingId);
      const group = orNotFound(grouping.groups.find((candidate) => candidate.label === label), 'group');
      await transact(db, async (trx) => {
        const inside = groupingsRepository(trx);
        const row = orNotFound(await inside.group(groupingId, label), 'group');
        if (row.version !== expectedVersion) throw staleVersion(row.version);
        await inside.updateGroup(groupingId, label, { name: change.name ?? row.name, slot: change.slot ?? row.slot, version: row.version + 1 });
        const sentence = change.name && change.name !== row.name ? `${actor.name} named group ${label} of “${grouping.name}” ${change.name}` : `${actor.name} recoloured group ${row.name} of “${grouping.name}”`;
        await record.add(trx, { actor, depositId, action: 'group.changed', subject: `grouping ${groupingId} group ${label}`, sentence });
      });
      const fresh = await get(depositId, groupingId);
      return fresh.groups.find((candidate) => candidate.label === label) ?? group;
    },
  };
}
export type GroupingsService = ReturnType<typeof createGroupings>;
