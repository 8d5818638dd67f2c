import * as z from 'zod';
import { ZoneRules, type StoredZoneRules, type Zone, type ZoneRun } from '#contract/geomet.ts';
import type { JobStarted } from '#contract/jobs.ts';
import { ppmPerUnit } from '#kernels/units/assay-unit.ts';
import { transact } from '#server/db/transact.ts';
import type { Actor } from '#server/lib/actor.ts';
import { toCsv } from '#server/lib/csv.ts';
import { AppError, orNotFound, staleVersion } from '#server/lib/errors.ts';
import type { AnalysisDeps } from '#server/modules/components/components.service.ts';
import type { DomainsService } from '#server/modules/domains/domains.service.ts';
import { recipeSha256 } from '#server/modules/domains/recipe.ts';
import type { GroupingsService } from '#server/modules/groupings/groupings.service.ts';
import { tablesOf } from '#server/modules/snapshots/snapshot-tables.ts';
import type { ZonesInput, ZonesOutput } from '#workers/tasks/zones.ts';
import { geometRepository, type StandsOn } from './geomet.repository.ts';

const Params = z.strictObject({ snapshotId: z.string(), rules: z.string(), recipeSha256: z.string() });
const EMPTY_RULES: StoredZoneRules = { limits: [], minLengthM: 3, maxDilutionM: 2, version: 0, updatedAt: null, updatedBy: null };
const CSV_ZONES = 100_000;

const bare = ({ limits, minLengthM, maxDilutionM }: ZoneRules): ZoneRules => ({ limits, minLengthM, maxDilutionM });

export function createGeomet({ db, clock, jobs, record, snapshots }: AnalysisDeps, groupings: GroupingsService, domains: DomainsService) {
  const repository = geometRepository(db);
  const rules = async (depositId: number): Promise<StoredZoneRules> => (await repository.rules(depositId)) ?? EMPTY_RULES;

  async function now(depositId: number): Promise<StandsOn> {
    const { domains: standing } = await domains.list(depositId);
    return { snapshotId: await snapshots.currentId(depositId), recipeSha256: recipeSha256(standing), rules: JSON.stringify(bare(await rules(depositId))) };
  }

  jobs.register<ZonesInput, ZonesOutput>('zones', {
    task: 'zones',
    async prepare({ id, depositId, params }) {
      const { snapshotId, rules: stored } = Params.parse(params);
      const snapshot = orNotFound(await snapshots.find(depositId, snapshotId), 'snapshot');
      const grouping = await groupings.active(depositId);
      const { domains: standing } = await domains.list(depositId);
      const { limits, minLengthM, maxDilutionM } = ZoneRules.parse(JSON.parse(stored));
      const isSurface = grouping ? grouping.support === 'surface' : snapshot.rows === snapshot.surfaceRows;
      const usable = grouping?.snapshotId === snapshotId ? grouping : null;
      return {
        depositId, jobId: id, tables: tablesOf(snapshot), support: isSurface ? 'surface' : 'drill', minLengthM, maxDilutionM,
        limits: limits.map(({ analyte, limit, unit }) => ({ analyte, limitPpm: limit * ppmPerUnit(unit) })),
        groupingTableId: usable?.tableId ?? null, domains: usable ? standing.map(({ code, groupLabels }) => ({ code, groupLabels })) : [],
      };
    },
    async finish(trx, { depositId, params, startedBy }, { tableId, found, result }) {
      const { snapshotId, rules: stored, recipeSha256: recipe } = Params.parse(params);
      const id = await geometRepository(trx).insert(
        { deposit_id: depositId, created_by: startedBy.id, created_at: clock().toISOString(), snapshot_id: snapshotId, table_id: tableId, rules: stored, recipe_sha256: recipe, result: JSON.stringify(result) },
        found,
      );
      await record.add(trx, { actor: startedBy, depositId, action: 'zones.run', subject: `zone run ${id}`, sentence: `${startedBy.name} flagged ${result.zones} deleterious zones` });
      return { kind: 'zone-run', id };
    },
  });

  const find = async (depositId: number, runId: number): Promise<ZoneRun> => orNotFound(await repository.find(depositId, runId, await now(depositId)), 'zone run');

  return {
    rules,
    find,
    list: async (depositId: number): Promise<ZoneRun[]> => repository.list(depositId, await now(depositId)),

    async saveRules(depositId: number, body: ZoneRules, expectedVersion: number, actor: Actor): Promise<StoredZoneRules> {
      const snapshot = await snapshots.latest(depositId);
      const known = new Set(snapshot?.analytes.map(({ analyte }) => analyte));
      const unknown = snapshot ? body.limits.filter(({ analyte }) => !known.has(analyte)).map(({ analyte }) => analyte) : [];
      if (unknown.length > 0) {
        const message = `expected loaded analytes, found ${unknown.join(', ')}`;
        throw new AppError(400, 'unknown-analyte', `Limits: ${message}.`, { fields: [{ path: 'body.limits', message }] });
      }
      await transact(db, async (trx) => {
        const inside = geometRepository(trx);
        const version = (await inside.rules(depositId))?.version ?? 0;
        if (version !== expectedVersion) throw staleVersion(version);
        await inside.putRules({ deposit_id: depositId, rules: JSON.stringify(bare(body)), version: version + 1, updated_at: clock().toISOString(), updated_by: actor.id });
        const limits = body.limits.map(({ analyte, limit, unit }) => `${analyte} ${limit} ${unit}`).join(', ') || 'none';
        await record.add(trx, { actor, depositId, action: 'zone-rules.changed', subject: 'zone rules', sentence: `${actor.name} set deleterious limits: ${limits}` });
      });
      return rules(depositId);
    },

    async start(depositId: number, actor: Actor): Promise<JobStarted> {
      const snapshot = await snapshots.ready(depositId);
      const { rules: stored, recipeSha256: recipe } = await now(depositId);
      const { limits } = await rules(depositId);
      if (limits.length === 0) throw new AppError(409, 'no-limits', 'Expected at least one limit to flag against, found none: set limits first.');
      const params = { snapshotId: snapshot.id, rules: stored, recipeSha256: recipe };
      return { job: await jobs.enqueue({ depositId, kind: 'zones', title: `Flag zones of ${limits.map(({ analyte }) => analyte).join(', ')}`, params, actor }) };
    },

    async zones(depositId: number, runId: number, query: { page: number; pageSize: number; analyte?: string | undefined; hole?: string | undefined }) {
      await find(depositId, runId);
      const { page, pageSize, ...only } = query;
      const [total, rows] = await Promise.all([repository.countZones(runId, only), repository.zones(runId, only, pageSize, (page - 1) * pageSize)]);
      return { rows, total, page, pageSize };
    },

    async zonesCsv(depositId: number, runId: number): Promise<string> {
      const { snapshotId } = await find(depositId, runId);
      const rows: Zone[] = await repository.zones(runId, {}, CSV_ZONES, 0);
      const header = ['hole', 'from_m', 'to_m', 'length_m', 'analyte', 'mean_ppm', 'max_ppm', 'internal_dilution_m', 'domains', 'snapshot'];
      return toCsv(header, rows.map((zone) => [zone.hole, zone.fromM, zone.toM, zone.lengthM, zone.analyte, zone.meanPpm, zone.maxPpm, zone.dilutionM, zone.domains.join(' '), snapshotId]));
    },
  };
}
export type GeometService = ReturnType<typeof createGeomet>;
