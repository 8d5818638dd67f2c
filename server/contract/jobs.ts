import * as z from 'zod';
import { DepositParams, Id, Instant, PersonRef } from './common.ts';
import { endpoint } from './endpoint.ts';
import { ANY_MEMBER } from './roles.ts';

export const JOB_KINDS = ['check-file', 'load-file', 'assemble', 'components', 'sweep', 'grouping', 'screen', 'evidence', 'zones', 'codes'] as const;
export const JobKind = z.enum(JOB_KINDS);
export type JobKind = z.infer<typeof JobKind>;
export const JobState = z.enum(['queued', 'running', 'done', 'failed', 'cancelled', 'interrupted']);
export type JobState = z.infer<typeof JobState>;

export const Job = z.object({
  id: z.number().int(),
  depositId: z.number().int(),
  kind: JobKind,
  /** What it does, for people: "Group 8,412 intervals into 6". */
  title: z.string(),
  state: JobState,
  /** 0 to 1. */
  progress: z.number().min(0).max(1),
  phase: z.string(),
  error: z.object({ code: z.string(), message: z.string() }).nullable(),
  /** What it made, when done: the resource's kind and id. */
  result: z.object({ kind: z.string(), id: z.union([z.number().int(), z.string()]) }).nullable(),
  startedBy: PersonRef,
  createdAt: Instant,
  startedAt: Instant.nullable(),
  endedAt: Instant.nullable(),
});
export type Job = z.infer<typeof Job>;

/** The answer to a request that starts long work. Follow `job` by events or by reading it. */
export const JobStarted = z.object({ job: Job });
export type JobStarted = z.infer<typeof JobStarted>;

/** One event of the stream: a job moved, or a resource of the deposit changed (query keys to refresh). */
export const DepositEvent = z.discriminatedUnion('type', [
  z.object({ type: z.literal('job'), job: Job }),
  z.object({ type: z.literal('changed'), resource: z.string() }),
]);
export type DepositEvent = z.infer<typeof DepositEvent>;

const tag = 'Jobs';
const access = { kind: 'deposit', roles: ANY_MEMBER } as const;
const JobParams = DepositParams.extend({ jobId: Id });

export const listJobs = endpoint({
  id: 'listJobs', method: 'get', path: '/deposits/:depositId/jobs', tag, access, summary: 'Latest jobs of a deposit', params: DepositParams, response: z.array(Job),
});
export const getJob = endpoint({
  id: 'getJob', method: 'get', path: '/deposits/:depositId/jobs/:jobId', tag, access, summary: 'One job', params: JobParams, response: Job,
});
export const cancelJob = endpoint({
  id: 'cancelJob', method: 'post', path: '/deposits/:depositId/jobs/:jobId/cancel', tag,
  access: { kind: 'deposit', roles: ['lead', 'geologist', 'geometallurgist', 'site-geologist', 'estimator'] },
  summary: 'Cancel a job; only the person who started it or a lead may', params: JobParams, response: Job,
});
export const streamEvents = endpoint({
  id: 'streamEvents', method: 'get', path: '/deposits/:depositId/events', tag, access, produces: 'events',
  summary: 'Server-sent events: jobs and changes; resumes by Last-Event-ID', params: DepositParams, response: DepositEvent,
});
