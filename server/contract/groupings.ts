import * as z from 'zod';
import { ColourSlot, DepositParams, Id, Instant, Name, PersonRef, Version } from './common.ts';
import { endpoint } from './endpoint.ts';
import { JobStarted } from './jobs.ts';
import { ANALYSTS, ANY_MEMBER } from './roles.ts';

export const SweepRow = z.object({
  k: z.number().int(), inertia: z.number(), silhouette: z.number().nullable(), calinskiHarabasz: z.number().nullable(), daviesBouldin: z.number().nullable(),
});
/** k-means at each number of groups, with criteria side by side. */
export const Sweep = z.object({
  id: z.number().int(), componentRunId: z.number().int(), components: z.number().int(), kFrom: z.number().int(), kTo: z.number().int(),
  rows: z.array(SweepRow), silhouetteRows: z.number().int(), suggestedK: z.number().int(), suggestion: z.string(), seed: z.number().int(), isStale: z.boolean(), createdAt: Instant,
});
export type Sweep = z.infer<typeof Sweep>;

export const Contiguity = z.object({ runs: z.number().int(), expectedRuns: z.number(), kappa: z.number().nullable(), meanRunM: z.number() });

export const Group = z.object({
  /** 1 … k; 1 has most intervals. */
  label: z.number().int(),
  name: z.string(),
  slot: ColourSlot,
  intervals: z.number().int(),
  metres: z.number(),
  meanMembership: z.number(),
  contiguity: Contiguity.nullable(),
  /** Metres (or samples, for surface) by logged lithology, largest first; code null = not logged. */
  lithology: z.array(z.object({ code: z.string().nullable(), metres: z.number(), share: z.number() })),
  version: Version,
});
export type Group = z.infer<typeof Group>;

/** One grouping. Columns `group` (1…k, NaN none) and `membership` of `tableId`, aligned with the frame. */
export const Grouping = z.object({
  id: z.number().int(),
  name: z.string(),
  componentRunId: z.number().int(),
  suiteId: z.number().int(),
  snapshotId: z.string(),
  snapshotNumber: z.number().int(),
  frameTableId: z.number().int(),
  componentTableId: z.number().int(),
  tableId: z.number().int(),
  isStale: z.boolean(),
  /** The grouping that candidate domains stand on. */
  isActive: z.boolean(),
  support: z.enum(['drill', 'surface']),
  k: z.number().int(),
  components: z.number().int(),
  seed: z.number().int(),
  n: z.number().int(),
  inertia: z.number(),
  silhouette: z.number().nullable(),
  silhouetteRows: z.number().int(),
  calinskiHarabasz: z.number().nullable(),
  groups: z.array(Group),
  /** Group medians of clr minus the median of all, groups × parts. */
  fingerprints: z.object({ parts: z.array(z.string()), values: z.array(z.array(z.number())) }),
  createdBy: PersonRef,
  createdAt: Instant,
});
export type Grouping = z.infer<typeof Grouping>;

const tag = 'Groups';
const read = { kind: 'deposit', roles: ANY_MEMBER } as const;
const write = { kind: 'deposit', roles: ANALYSTS } as const;
const GroupingParams = DepositParams.extend({ groupingId: Id });
const Seed = z.number().int().min(1).max(2147483647).default(1);

export const listSweeps = endpoint({
  id: 'listSweeps', method: 'get', path: '/deposits/:depositId/sweeps', tag, access: read, summary: 'Sweeps over the number of groups, newest first', params: DepositParams, response: z.array(Sweep),
});
export const startSweep = endpoint({
  id: 'startSweep', method: 'post', path: '/deposits/:depositId/sweeps', tag, access: write, summary: 'Try k-means for each number of groups', params: DepositParams,
  body: z.strictObject({ componentRunId: Id, components: z.number().int().min(1).max(40), kFrom: z.number().int().min(2).max(20).default(2), kTo: z.number().int().min(2).max(20).default(12), seed: Seed })
    .refine((body) => body.kFrom <= body.kTo, { message: 'expected kFrom at most kTo', path: ['kFrom'] }),
  response: JobStarted, status: 202, idempotent: true,
});
export const listGroupings = endpoint({
  id: 'listGroupings', method: 'get', path: '/deposits/:depositId/groupings', tag, access: read, summary: 'Groupings, newest first', params: DepositParams, response: z.array(Grouping),
});
export const getGrouping = endpoint({
  id: 'getGrouping', method: 'get', path: '/deposits/:depositId/groupings/:groupingId', tag, access: read, summary: 'One grouping with its groups and fingerprints', params: GroupingParams, response: Grouping,
});
export const startGrouping = endpoint({
  id: 'startGrouping', method: 'post', path: '/deposits/:depositId/groupings', tag, access: write, summary: 'Group the intervals by k-means on kept components', params: DepositParams,
  body: z.strictObject({ componentRunId: Id, components: z.number().int().min(1).max(40), k: z.number().int().min(2).max(16), seed: Seed, name: Name.optional() }),
  response: JobStarted, status: 202, idempotent: true,
});
export const useGrouping = endpoint({
  id: 'useGrouping', method: 'post', path: '/deposits/:depositId/groupings/:groupingId/use', tag, access: write,
  summary: 'Let candidate domains stand on this grouping (409 while domains stand on another)', params: GroupingParams, response: Grouping,
});
export const updateGroup = endpoint({
  id: 'updateGroup', method: 'patch', path: '/deposits/:depositId/groupings/:groupingId/groups/:label', tag, access: write, summary: 'Rename or recolour a group',
  params: GroupingParams.extend({ label: z.coerce.number().int().min(1).max(20) }), body: z.strictObject({ name: Name.optional(), slot: ColourSlot.optional() }), response: Group, ifMatch: true,
});
