import * as z from 'zod';
import { Analyte, DepositParams, Id, Instant, PersonRef } from './common.ts';
import { endpoint } from './endpoint.ts';
import { JobStarted } from './jobs.ts';
import { ANALYSTS, ANY_MEMBER } from './roles.ts';

export const Verdict = z.enum(['single', 'suspect', 'mixed', 'too-few']);
export type Verdict = z.infer<typeof Verdict>;

export const SubsetKind = z.enum(['all', 'group', 'lithology', 'weathering', 'domain', 'side']);
export const Subset = z.object({
  /** For example `all`, `group:3`, `lithology:AND`. */
  key: z.string(), kind: SubsetKind, label: z.string(), slot: z.number().int().nullable(), n: z.number().int(), metres: z.number(),
});
export type Subset = z.infer<typeof Subset>;

export const CellSummary = z.object({
  subsetKey: z.string(), variable: z.string(), verdict: Verdict, n: z.number().int(), mean: z.number().nullable(), median: z.number().nullable(),
  cv: z.number().nullable(), dip: z.number().nullable(), dipP: z.number().nullable(), deltaBic: z.number().nullable(), populations: z.number().int().nullable(),
});
export type CellSummary = z.infer<typeof CellSummary>;

/** One lognormal component: share, median in ppm, standard deviation of ln. */
export const MixtureComponent = z.object({ share: z.number(), medianPpm: z.number(), logSd: z.number() });
export const MixtureFit = z.object({
  k: z.number().int(), bic: z.number().nullable(), logLik: z.number().nullable(), accepted: z.boolean(), note: z.string().nullable(), components: z.array(MixtureComponent),
});
export type MixtureFit = z.infer<typeof MixtureFit>;

/** Everything one mixing verdict stands on. Grades in ppm; `weighted` says whether metres weight the statistics. */
export const CellDetail = CellSummary.extend({
  subsetLabel: z.string(),
  metres: z.number(), nBelow: z.number().int(), nAbove: z.number().int(), nMissing: z.number().int(),
  min: z.number().nullable(), max: z.number().nullable(), logSd: z.number().nullable(), weighted: z.boolean(),
  dipPText: z.string(), mixtures: z.array(MixtureFit), chosenK: z.number().int().nullable(), evenOddsPpm: z.number().nullable(),
  reasons: z.array(z.string()),
  /** Points of the log-probability plot: normal score and grade; thinned, tails kept. */
  plot: z.object({ z: z.array(z.number()), ppm: z.array(z.number()), drawnOf: z.number().int() }),
  /** Histogram of ln grade: edges in ppm, counts. */
  histogram: z.object({ edgesPpm: z.array(z.number()), counts: z.array(z.number()) }),
  notes: z.array(z.string()),
});
export type CellDetail = z.infer<typeof CellDetail>;

export const Screen = z.object({
  id: z.number().int(), groupingId: z.number().int().nullable(), groupingName: z.string().nullable(), snapshotId: z.string(), snapshotNumber: z.number().int(), isStale: z.boolean(),
  support: z.enum(['drill', 'surface']), variables: z.array(z.string()), subsets: z.array(Subset), cells: z.array(CellSummary), createdBy: PersonRef, createdAt: Instant,
  finding: z.string(),
});
export type Screen = z.infer<typeof Screen>;

const tag = 'Populations';
const read = { kind: 'deposit', roles: ANY_MEMBER } as const;
const write = { kind: 'deposit', roles: ANALYSTS } as const;
const ScreenParams = DepositParams.extend({ screenId: Id });

export const listScreens = endpoint({
  id: 'listScreens', method: 'get', path: '/deposits/:depositId/screens', tag, access: read, summary: 'Population screens, newest first', params: DepositParams, response: z.array(Screen),
});
export const getScreen = endpoint({
  id: 'getScreen', method: 'get', path: '/deposits/:depositId/screens/:screenId', tag, access: read, summary: 'One screen: the matrix of subset × variable', params: ScreenParams, response: Screen,
});
export const getScreenCell = endpoint({
  id: 'getScreenCell', method: 'get', path: '/deposits/:depositId/screens/:screenId/cell', tag, access: read, summary: 'One cell of a screen with its plots and reasons',
  params: ScreenParams, query: z.strictObject({ subset: z.string().min(1).max(200), variable: Analyte }), response: CellDetail,
});
export const startScreen = endpoint({
  id: 'startScreen', method: 'post', path: '/deposits/:depositId/screens', tag, access: write, summary: 'Screen variables for mixed populations in each subset', params: DepositParams,
  body: z.strictObject({
    support: z.enum(['drill', 'surface']).default('drill'),
    variables: z.array(Analyte).min(1).max(20), groupingId: Id.nullable().default(null),
    subsets: z.array(z.enum(['group', 'lithology', 'weathering'])).max(3).default(['group', 'lithology', 'weathering']),
  }),
  response: JobStarted, status: 202, idempotent: true,
});
