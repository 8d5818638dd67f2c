import * as z from 'zod';
import { DepositParams, Id, Instant, PersonRef } from './common.ts';
import { endpoint } from './endpoint.ts';
import { JobStarted } from './jobs.ts';
import { ANALYSTS, ANY_MEMBER } from './roles.ts';

/** Which elements oppose on one component. */
export const ComponentReading = z.object({ component: z.number().int(), positive: z.array(z.string()), negative: z.array(z.string()), sentence: z.string() });
export type ComponentReading = z.infer<typeof ComponentReading>;

/** PCA of clr coordinates. Columns `PC1`, `PC2`… of `tableId` hold the scores, aligned with the frame. */
export const ComponentRun = z.object({
  id: z.number().int(),
  suiteId: z.number().int(),
  suiteName: z.string(),
  snapshotId: z.string(),
  snapshotNumber: z.number().int(),
  frameTableId: z.number().int(),
  tableId: z.number().int(),
  isStale: z.boolean(),
  parts: z.array(z.string()),
  support: z.enum(['drill', 'surface']),
  /** Rows used in the fit, rows only scored (more than 30 % of parts below limit), rows left out (a part missing). */
  nFit: z.number().int(),
  nScoredOnly: z.number().int(),
  nLeftOut: z.number().int(),
  /** Share of all values used that were below detection, and the share of the limit they became. */
  replacedShare: z.number(),
  replacementFraction: z.number(),
  eigenvalues: z.array(z.number()),
  shares: z.array(z.number()),
  /** parts × stored components, row by row. */
  loadings: z.array(z.array(z.number())),
  /** Per component, as shares of the total variance: what a broken stick gives, and the 95th percentile under independence. */
  brokenStick: z.array(z.number()),
  parallel95: z.array(z.number()),
  suggested: z.number().int(),
  suggestion: z.string(),
  readings: z.array(ComponentReading),
  /** Components stored as scores. */
  stored: z.number().int(),
  notes: z.array(z.string()),
  seed: z.number().int(),
  createdBy: PersonRef,
  createdAt: Instant,
});
export type ComponentRun = z.infer<typeof ComponentRun>;

const tag = 'Components';
const read = { kind: 'deposit', roles: ANY_MEMBER } as const;
const write = { kind: 'deposit', roles: ANALYSTS } as const;

export const listComponentRuns = endpoint({
  id: 'listComponentRuns', method: 'get', path: '/deposits/:depositId/component-runs', tag, access: read, summary: 'Component runs, newest first', params: DepositParams, response: z.array(ComponentRun),
});
export const getComponentRun = endpoint({
  id: 'getComponentRun', method: 'get', path: '/deposits/:depositId/component-runs/:runId', tag, access: read, summary: 'One component run', params: DepositParams.extend({ runId: Id }), response: ComponentRun,
});
export const startComponents = endpoint({
  id: 'startComponents', method: 'post', path: '/deposits/:depositId/component-runs', tag, access: write,
  summary: 'Run log-ratio PCA on a suite and the current snapshot', params: DepositParams,
  body: z.strictObject({ suiteId: Id, seed: z.number().int().min(1).max(2147483647).default(1) }), response: JobStarted, status: 202, idempotent: true,
});
