import * as z from 'zod';
import { DepositParams } from './common.ts';
import { endpoint } from './endpoint.ts';
import { ANY_MEMBER } from './roles.ts';
import { FaultPlane } from './snapshots.ts';

const Point = z.tuple([z.number(), z.number(), z.number()]);

export const HoleRow = z.object({
  hole: z.string(),
  x: z.number(),
  y: z.number(),
  z: z.number(),
  lengthM: z.number(),
  assayedM: z.number(),
  intervals: z.number().int(),
  /** First row of this hole in the frame; its intervals are the `intervals` rows from there. */
  firstRow: z.number().int(),
  campaign: z.string().nullable(),
  /** Desurveyed positions from collar to end, easting, northing, elevation. */
  trace: z.array(Point),
});
export type HoleRow = z.infer<typeof HoleRow>;

export const Station = z.object({ depthM: z.number(), azimuth: z.number(), dip: z.number(), x: z.number(), y: z.number(), z: z.number() });
export const LoggedInterval = z.object({ fromM: z.number(), toM: z.number(), code: z.string() });
export type LoggedInterval = z.infer<typeof LoggedInterval>;
export const StructureReading = z.object({
  depthM: z.number(), type: z.string(), confidence: z.string(), alpha: z.number().nullable(), beta: z.number().nullable(),
  dip: z.number().nullable(), dipDirection: z.number().nullable(),
});
export type StructureReading = z.infer<typeof StructureReading>;

export const HoleDetail = HoleRow.extend({
  stations: z.array(Station),
  lithology: z.array(LoggedInterval),
  weathering: z.array(LoggedInterval),
  structures: z.array(StructureReading),
  analytes: z.array(z.string()),
  /** One entry per assayed interval; `ppm` follows `analytes`, null = missing; `marks`: 0 measured, 1 below limit, 2 above limit, 3 missing, 4 not analysed. */
  assays: z.array(z.object({ row: z.number().int(), fromM: z.number(), toM: z.number(), sample: z.string(), ppm: z.array(z.number().nullable()), marks: z.array(z.number().int()) })),
  notes: z.array(z.string()),
});
export type HoleDetail = z.infer<typeof HoleDetail>;

const tag = 'Holes';
const access = { kind: 'deposit', roles: ANY_MEMBER } as const;

export const listHoles = endpoint({
  id: 'listHoles', method: 'get', path: '/deposits/:depositId/holes', tag, access,
  summary: 'Holes of the current snapshot with their traces, and the fault planes', params: DepositParams,
  response: z.object({ snapshotId: z.string().nullable(), holes: z.array(HoleRow), faults: z.array(FaultPlane) }),
});
export const getHole = endpoint({
  id: 'getHole', method: 'get', path: '/deposits/:depositId/holes/:hole', tag, access,
  summary: 'One hole: survey, logs, structures, assays', params: DepositParams.extend({ hole: z.string().min(1).max(120) }), response: HoleDetail,
});
