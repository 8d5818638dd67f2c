import type { Knex } from 'knex';
import type { Job, JobKind, JobState } from '#contract/jobs.ts';
import type { Role } from '#contract/roles.ts';
import { transact } from '#server/db/transact.ts';
import type { Person } from '#server/lib/actor.ts';
import { systemClock, type Clock } from '#server/lib/clock.ts';
import { AppError, orNotFound } from '#server/lib/errors.ts';
import type { Log } from '#server/lib/log.ts';
import type { Compute } from '#workers/client.ts';
import { CHANGED_BY } from './changed-by.ts';
import type { Events } from './events.ts';
import { createJobKinds, type JobKindSpec } from './jobs.kinds.ts';
import { jobsRepository, WAITING } from './jobs.repository.ts';
import { createScheduler } from './jobs.scheduler.ts';

export type { JobKindSpec, JobResult } from './jobs.kinds.ts';
export type { StoredJob } from './jobs.repository.ts';

export interface JobsDeps {
  db: Knex;
  compute: Compute;
  events: Events;
  log: Log;
  clock?: Clock;
  /** Jobs running at one time. */
  slots?: number;
}

export interface JobRequest {
  depositId: number;
  kind: JobKind;
  /** What it does, for people: "Group 8,412 intervals into 6". */
  title: string;
  /** JSON, parsed again by the kind's own schema. */
  params: object;
  actor: Person;
}

const DEFAULT_SLOTS = 2;
const MAX_WAITING_OF_DEPOSIT = 20;
const MAX_WAITING_IN_ALL = 200;
const RETRY_AFTER_S = 30;

const ENDED: readonly JobState[] = ['done', 'failed', 'cancelled'];
const isEnded = ({ state }: Job): boolean => ENDED.includes(state);

/** Long work: asked for, waiting its turn, running on the compute host, told of by events. */
export function createJobsService({ db, compute, events, log, clock = systemClock, slots = DEFAULT_SLOTS }: JobsDeps) {
  const repository = jobsRepository(db);
  const kinds = createJobKinds(compute);
  const scheduler = createScheduler({ db, compute, clock, log, kinds, slots, emit });

  function emit(job: Job): void {
    events.publish(job.depositId, { type: 'job', job });
    if (job.state !== 'done') return;
    for (const resource of CHANGED_BY[job.kind]) events.changed(job.depositId, resource);
  }

  const asSeen = (job: Job): Job => scheduler.viewOf(job.id) ?? job;

  async function get(depositId: number, jobId: number): Promise<Job> {
    const job = await repository.find(jobId);
    return asSeen(orNotFound(job?.depositId === depositId ? job : null, 'job'));
  }

  async function refuseWhenFull(depositId: number): Promise<void> {
    if ((await repository.countWaiting({ deposit_id: depositId })) >= MAX_WAITING_OF_DEPOSIT) {
      const message = `This deposit has ${MAX_WAITING_OF_DEPOSIT} jobs waiting, as many as it may; let some end or cancel them.`;
      throw new AppError(429, 'queue-full', message, { retryAfterS: RETRY_AFTER_S });
    }
    if ((await repository.countWaiting({})) >= MAX_WAITING_IN_ALL) {
      const message = `The service has ${MAX_WAITING_IN_ALL} jobs waiting, as many as it may; try again later.`;
      throw new AppError(503, 'queue-full', message, { retryAfterS: RETRY_AFTER_S });
    }
  }

  /** Cancels a job that waits; false when it waits no more. */
  const cancelWaiting = (jobId: number): Promise<boolean> =>
    transact(db, (trx) =>
      jobsRepository(trx).change(jobId, WAITING, { state: 'cancelled', ended_at: clock().toISOString() }),
    );

  return {
    /** A module's kind of job; once each, before `start`. */
    register<In, Out>(kind: JobKind, spec: JobKindSpec<In, Out>): void {
      kinds.register(kind, spec);
    },

    /** Puts a job in the queue. Not within a transaction: the pool has one connection. */
    async enqueue({ depositId, kind, title, params, actor }: JobRequest): Promise<Job> {
      if (!kinds.find(kind)) throw new Error(`jobs of kind ${kind} are not registered`);
      await refuseWhenFull(depositId);
      const createdAt = clock().toISOString();
      const jobId = await transact(db, (trx) =>
        jobsRepository(trx).insert({ depositId, kind, title, params, startedById: actor.id, createdAt }),
      );
      const job = await get(depositId, jobId);
      emit(job);
      scheduler.pump();
      return job;
    },

    /** The latest jobs of a deposit, newest first. */
    list: async (depositId: number): Promise<Job[]> => (await repository.latest(depositId)).map(asSeen),
    get,

    /** Stops a job; answers once it has stopped, within 2 s. */
    async cancel(depositId: number, jobId: number, who: { id: number; role: Role }): Promise<Job> {
      const job = await get(depositId, jobId);
      if (job.startedBy.id !== who.id && who.role !== 'lead') {
        throw new AppError(403, 'not-yours', 'Only the person who started a job, or a lead, may cancel it.');
      }
      if (!isEnded(job) && (await cancelWaiting(jobId))) emit(await get(depositId, jobId));
      else if (isEnded(job) || !(await scheduler.stop(jobId, 'cancelled'))) {
        throw new AppError(409, 'job-ended', `This job has ended already: it is ${job.state}.`);
      }
      return get(depositId, jobId);
    },

    /** Resolves with the job once it is done, failed or cancelled. */
    async waitFor(jobId: number): Promise<Job> {
      const { depositId } = orNotFound(await repository.find(jobId), 'job');
      let unsubscribe = (): void => undefined;
      const ended = new Promise<Job>((resolve) => {
        unsubscribe = events.subscribe(depositId, ({ event }) => {
          if (event.type === 'job' && event.job.id === jobId && isEnded(event.job)) resolve(event.job);
        });
      });
      const job = await get(depositId, jobId);
      const final = isEnded(job) ? job : await ended;
      unsubscribe();
      return final;
    },

    /** Takes up what the last run of the server left; call once every kind is registered. */
    start: (): Promise<void> => scheduler.recover(),
    /** Stops everything so that the next start takes it up. Before the compute host and the database close. */
    close: (): Promise<void> => scheduler.close(),
  };
}
export type JobsService = ReturnType<typeof createJobsService>;
