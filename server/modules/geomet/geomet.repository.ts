import type { Knex } from 'knex';
import { Zone, ZoneRules, ZoneRun, type StoredZoneRules } from '#contract/geomet.ts';

export interface ZoneRunRow {
  id: number;
  deposit_id: number;
  created_by: number;
  created_at: string;
  snapshot_id: string;
  table_id: number;
  rules: string;
  recipe_sha256: string;
  result: string;
}

interface JoinedRow extends ZoneRunRow {
  created_by_name: string;
  snapshot_number: number;
  frame_table_id: number;
}

interface RulesRow {
  deposit_id: number;
  rules: string;
  version: number;
  updated_at: string;
  updated_by: number;
}

interface ZoneRow {
  id: number;
  zone_run_id: number;
  analyte: string;
  hole: string;
  from_m: number;
  to_m: number;
  zone: string;
}

export const ZoneResult = ZoneRun.pick({ zones: true, flaggedMetres: true, totalMetres: true, byAnalyte: true, byDomain: true, notes: true, finding: true });

/** What a zone run stands on besides its snapshot; another value makes it stale. */
export interface StandsOn {
  snapshotId: string;
  recipeSha256: string;
  rules: string;
}

export function geometRepository(db: Knex) {
  const joined = (depositId: number) =>
    db<JoinedRow>('zone_runs')
      .join('users', 'users.id', 'zone_runs.created_by')
      .join('snapshots', (on) => on.on('snapshots.id', 'zone_runs.snapshot_id').andOn('snapshots.deposit_id', 'zone_runs.deposit_id'))
      .where('zone_runs.deposit_id', depositId)
      .select<JoinedRow[]>('zone_runs.*', 'users.name as created_by_name', 'snapshots.number as snapshot_number', 'snapshots.frame_table_id');

  const toRun = (row: JoinedRow, now: StandsOn): ZoneRun => ({
    ...ZoneResult.parse(JSON.parse(row.result)),
    id: row.id, snapshotId: row.snapshot_id, snapshotNumber: row.snapshot_number, frameTableId: row.frame_table_id, tableId: row.table_id,
    isStale: row.snapshot_id !== now.snapshotId || row.recipe_sha256 !== now.recipeSha256 || row.rules !== now.rules,
    rules: ZoneRules.parse(JSON.parse(row.rules)), createdBy: { id: row.created_by, name: row.created_by_name }, createdAt: row.created_at,
  });

  const zones = (runId: number, only: { analyte?: string | undefined; hole?: string | undefined }) => {
    const query = db<ZoneRow>('zones').where({ zone_run_id: runId });
    if (only.analyte) void query.where({ analyte: only.analyte });
    if (only.hole) void query.where({ hole: only.hole });
    return query;
  };

  return {
    async rules(depositId: number): Promise<(StoredZoneRules & { version: number }) | null> {
      const row: (RulesRow & { name: string }) | undefined = await db('zone_rules').join('users', 'users.id', 'zone_rules.updated_by').where({ deposit_id: depositId }).first('zone_rules.*', 'users.name');
      return row ? { ...ZoneRules.parse(JSON.parse(row.rules)), version: row.version, updatedAt: row.updated_at, updatedBy: row.name } : null;
    },
    putRules: (row: RulesRow) => db<RulesRow>('zone_rules').insert(row).onConflict('deposit_id').merge(),
    async list(depositId: number, now: StandsOn): Promise<ZoneRun[]> {
      const rows: JoinedRow[] = await joined(depositId).orderBy('zone_runs.id', 'desc').limit(20);
      return rows.map((row) => toRun(row, now));
    },
    async find(depositId: number, runId: number, now: StandsOn): Promise<ZoneRun | null> {
      const row: JoinedRow | undefined = await joined(depositId).where('zone_runs.id', runId).first();
      return row ? toRun(row, now) : null;
    },
    async insert(row: Omit<ZoneRunRow, 'id'>, found: readonly Zone[]): Promise<number> {
      const [made] = await db<ZoneRunRow>('zone_runs').insert(row).returning('id');
      const id = made?.id ?? 0;
      const rows = found.map((zone) => ({ zone_run_id: id, analyte: zone.analyte, hole: zone.hole, from_m: zone.fromM, to_m: zone.toM, zone: JSON.stringify(zone) }));
      const batch = 100;
      for (let start = 0; start < rows.length; start += batch) await db<ZoneRow>('zones').insert(rows.slice(start, start + batch));
      return id;
    },
    async countZones(runId: number, only: Parameters<typeof zones>[1]): Promise<number> {
      const [counted] = await zones(runId, only).count<{ total: number }[]>({ total: '*' });
      return counted?.total ?? 0;
    },
    async zones(runId: number, only: Parameters<typeof zones>[1], limit: number, offset: number): Promise<Zone[]> {
      const rows = await zones(runId, only).orderByRaw('(to_m - from_m) DESC, hole, from_m').limit(limit).offset(offset).select('zone');
      return rows.map(({ zone }) => Zone.parse(JSON.parse(zone)));
    },
  };
}
