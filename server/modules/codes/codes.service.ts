import { join } from 'node:path';
import * as z from 'zod';
import { Id } from '#contract/common.ts';
import { CodeSet } from '#contract/codes.ts';
import type { JobStarted } from '#contract/jobs.ts';
import { transact } from '#server/db/transact.ts';
import type { Actor } from '#server/lib/actor.ts';
import { AppError, orNotFound } from '#server/lib/errors.ts';
import { inFigures } from '#server/lib/figures.ts';
import type { AnalysisDeps } from '#server/modules/components/components.service.ts';
import type { DomainsService } from '#server/modules/domains/domains.service.ts';
import { recipeSha256 } from '#server/modules/domains/recipe.ts';
import type { GeometService } from '#server/modules/geomet/geomet.service.ts';
import type { GroupingsService } from '#server/modules/groupings/groupings.service.ts';
import { tablesOf } from '#server/modules/snapshots/snapshot-tables.ts';
import type { Compute } from '#workers/client.ts';
import type { CodesInput, CodesOutput } from '#workers/tasks/codes.ts';
import { codesRepository } from './codes.repository.ts';

const Recipe = CodeSet.shape.recipe.shape.rules;
const Params = z.strictObject({ snapshotId: z.string(), groupingId: Id, zoneRunId: Id.nullable(), recipe: Recipe, recipeSha256: z.string(), slots: z.array(z.tuple([z.string(), z.number().int()])) });

export interface CodesDeps extends AnalysisDeps {
  compute: Compute;
  /** Folder the files are kept in, by their SHA-256. */
  codesDir: string;
}

export function createCodes(deps: CodesDeps, groupings: GroupingsService, domains: DomainsService, geomet: GeometService) {
  const { db, clock, jobs, record, snapshots, compute, codesDir } = deps;
  const repository = codesRepository(db);

  async function now(depositId: number) {
    const { domains: standing } = await domains.list(depositId);
    return { snapshotId: await snapshots.currentId(depositId), recipeSha256: recipeSha256(standing) };
  }
  const get = async (depositId: number, codeSetId: number): Promise<CodeSet> => orNotFound(await repository.find(depositId, codeSetId, await now(depositId)), 'set of codes');

  /** The same input gives the same bytes: everything the file holds is named here. */
  async function inputOf(depositId: number, set: Pick<CodeSet, 'snapshotId' | 'groupingId' | 'zoneRunId'> & { rules: CodeSet['recipe']['rules'] }): Promise<CodesInput> {
    const snapshot = orNotFound(await snapshots.find(depositId, set.snapshotId), 'snapshot');
    const grouping = await groupings.get(depositId, set.groupingId);
    const zoneRun = set.zoneRunId === null ? null : await geomet.find(depositId, set.zoneRunId);
    return {
      snapshotId: snapshot.id, tables: tablesOf(snapshot), support: grouping.support, groupingTableId: grouping.tableId,
      zoneTableId: zoneRun?.tableId ?? null, zoneAnalytes: zoneRun?.rules.limits.map(({ analyte }) => analyte) ?? [], rules: set.rules, codesDir,
    };
  }

  jobs.register<CodesInput, CodesOutput>('codes', {
    task: 'codes',
    async prepare({ depositId, params }) {
      const { recipe, ...set } = Params.parse(params);
      return inputOf(depositId, { ...set, rules: recipe });
    },
    async finish(trx, { depositId, params, startedBy }, { sha256, sizeBytes, result }) {
      const { snapshotId, groupingId, zoneRunId, recipe, recipeSha256: recipeHash, slots } = Params.parse(params);
      const inside = codesRepository(trx);
      const number = await inside.nextNumber(depositId);
      const slotOf = new Map(slots);
      const byCode = result.byCode.map((entry) => ({ ...entry, slot: slotOf.get(entry.code) ?? null }));
      const id = await inside.insert({
        deposit_id: depositId, created_by: startedBy.id, created_at: clock().toISOString(), number, snapshot_id: snapshotId, grouping_id: groupingId, zone_run_id: zoneRunId,
        recipe: JSON.stringify(recipe), recipe_sha256: recipeHash, sha256, size_bytes: sizeBytes, file_name: `codes-${number}.csv`, result: JSON.stringify({ ...result, byCode }),
      });
      await record.add(trx, { actor: startedBy, depositId, action: 'codes.made', subject: `code set ${id}`, sentence: `${startedBy.name} made codes ${number}: ${inFigures(result.rows)} rows, SHA-256 ${sha256.slice(0, 12)}…` });
      return { kind: 'code-set', id };
    },
  });

  return {
    get,
    list: async (depositId: number): Promise<CodeSet[]> => repository.list(depositId, await now(depositId)),

    async make(depositId: number, actor: Actor): Promise<JobStarted> {
      const snapshot = await snapshots.ready(depositId);
      const grouping = await groupings.active(depositId);
      const { domains: standing } = await domains.list(depositId);
      if (!grouping || standing.length === 0) throw new AppError(409, 'no-domains', 'Expected at least one candidate domain to give codes by, found none: accept a group in Domains first.');
      if (grouping.snapshotId !== snapshot.id) throw new AppError(409, 'grouping-stale', `Domains stand on snapshot ${grouping.snapshotNumber}; group again on snapshot ${snapshot.number} first.`);
      const [zoneRun] = await geomet.list(depositId);
      const recipe = standing.map(({ code, name, groupLabels }) => ({ code, name, groupLabels, groupNames: groupLabels.map((label) => grouping.groups.find((group) => group.label === label)?.name ?? '') }));
      const params: z.input<typeof Params> = {
        snapshotId: snapshot.id, groupingId: grouping.id, zoneRunId: zoneRun && !zoneRun.isStale ? zoneRun.id : null, recipe, recipeSha256: recipeSha256(standing),
        slots: standing.map(({ code, slot }): [string, number] => [code, slot]),
      };
      return { job: await jobs.enqueue({ depositId, kind: 'codes', title: `Make codes from ${standing.length} domains`, params, actor }) };
    },

    async file(depositId: number, codeSetId: number) {
      const { sha256, fileName, sizeBytes } = await get(depositId, codeSetId);
      return { path: join(codesDir, `${sha256}.csv`), sha256, fileName, sizeBytes };
    },

    /** Makes the bytes again from the same snapshot and recipe, beside the recorded ones. */
    async verify(depositId: number, codeSetId: number, actor: Actor) {
      const set = await get(depositId, codeSetId);
      const input = await inputOf(depositId, { ...set, rules: set.recipe.rules });
      const { sha256 } = await compute.run<CodesInput, CodesOutput>('codes', { ...input, codesDir: null });
      const same = sha256 === set.sha256;
      await transact(db, (trx) => record.add(trx, { actor, depositId, action: 'codes.verified', subject: `code set ${codeSetId}`, sentence: `${actor.name} made codes ${set.number} again: ${same ? 'the same bytes' : 'other bytes'}` }));
      return { same, recorded: set.sha256, again: sha256, at: clock().toISOString() };
    },
  };
}
export type CodesService = ReturnType<typeof createCodes>;
