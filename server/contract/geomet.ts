import * as z from 'zod';
import { Analyte, DepositParams, Id, Instant, PageQuery, PersonRef, pageOf, Opaque, Version } from './common.ts';
import { GradeUnit } from './deposits.ts';
import { endpoint } from './endpoint.ts';
import { JobStarted } from './jobs.ts';
import { ANY_MEMBER, GEOMET_ANALYSTS } from './roles.ts';

/** A limit in the unit people think in; compared in ppm. */
export const Limit = z.strictObject({ analyte: Analyte, limit: z.number().positive('expected a limit above 0'), unit: GradeUnit });
export type Limit = z.infer<typeof Limit>;

export const ZoneRules = z.strictObject({
  limits: z.array(Limit).max(20).refine((list) => new Set(list.map((limit) => limit.analyte)).size === list.length, 'expected one limit per analyte'),
  minLengthM: z.number().min(0).max(1000).default(3),
  maxDilutionM: z.number().min(0).max(1000).default(2),
});
export type ZoneRules = z.infer<typeof ZoneRules>;
export type ZoneRulesInput = z.input<typeof ZoneRules>;
export const StoredZoneRules = ZoneRules.extend({ version: Version, updatedAt: Instant.nullable(), updatedBy: z.string().nullable() });
export type StoredZoneRules = z.infer<typeof StoredZoneRules>;

export const FlaggedShare = z.object({ analyte: z.string(), metres: z.number(), share: z.number() });
/** Deleterious zones. Column `flagged` (0/1) and `zone of <analyte>` (0/1) of `tableId`, aligned with the frame. */
export const ZoneRun = z.object({
  id: z.number().int(), snapshotId: z.string(), snapshotNumber: z.number().int(), frameTableId: z.number().int(), tableId: z.number().int(), isStale: z.boolean(), rules: ZoneRules, zones: z.number().int(), flaggedMetres: z.number(), totalMetres: z.number(),
  byAnalyte: z.array(z.object({ analyte: z.string(), zones: z.number().int(), metres: z.number(), intervalsOver: z.number().int(), metresOver: z.number() })),
  byDomain: z.array(z.object({ code: z.string(), metres: z.number(), flaggedMetres: z.number(), share: z.number(), byAnalyte: z.array(FlaggedShare) })),
  notes: z.array(z.string()), createdBy: PersonRef, createdAt: Instant, finding: z.string(),
});
export type ZoneRun = z.infer<typeof ZoneRun>;

export const Zone = z.object({
  hole: z.string(), fromM: z.number(), toM: z.number(), lengthM: z.number(), analyte: z.string(), meanPpm: z.number(), maxPpm: z.number(), dilutionM: z.number(), domains: z.array(z.string()), firstRow: z.number().int(), lastRow: z.number().int(),
});
export type Zone = z.infer<typeof Zone>;

const tag = 'Geomet';
const read = { kind: 'deposit', roles: ANY_MEMBER } as const;
const write = { kind: 'deposit', roles: GEOMET_ANALYSTS } as const;
const RunParams = DepositParams.extend({ runId: Id });

export const getZoneRules = endpoint({
  id: 'getZoneRules', method: 'get', path: '/deposits/:depositId/zone-rules', tag, access: read, summary: 'Deleterious limits and run rules in force', params: DepositParams, response: StoredZoneRules,
});
export const saveZoneRules = endpoint({
  id: 'saveZoneRules', method: 'put', path: '/deposits/:depositId/zone-rules', tag, access: write, summary: 'Set deleterious limits and run rules', params: DepositParams, body: ZoneRules, response: StoredZoneRules, ifMatch: true,
});
export const listZoneRuns = endpoint({
  id: 'listZoneRuns', method: 'get', path: '/deposits/:depositId/zone-runs', tag, access: read, summary: 'Zone runs, newest first', params: DepositParams, response: z.array(ZoneRun),
});
export const startZones = endpoint({
  id: 'startZones', method: 'post', path: '/deposits/:depositId/zone-runs', tag, access: write, summary: 'Flag intervals over the limits and merge them into zones', params: DepositParams, response: JobStarted, status: 202, idempotent: true,
});
export const listZones = endpoint({
  id: 'listZones', method: 'get', path: '/deposits/:depositId/zone-runs/:runId/zones', tag, access: read, summary: 'Zones of a run, longest first', params: RunParams, query: PageQuery.extend({ analyte: Analyte.optional(), hole: z.string().max(120).optional() }), response: pageOf(Zone),
});
export const downloadZones = endpoint({
  id: 'downloadZones', method: 'get', path: '/deposits/:depositId/zone-runs/:runId/zones.csv', tag, access: read, produces: 'csv', summary: 'Zones of a run as CSV', params: RunParams, response: Opaque,
});
