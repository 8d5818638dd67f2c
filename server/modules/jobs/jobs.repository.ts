import type { Knex } from 'knex';
import * as z from 'zod';
import { Job, type JobKind, type JobState } from '#contract/jobs.ts';
import type { Person } from '#server/lib/actor.ts';

interface JobRow {
  id: number;
  deposit_id: number;
  kind: JobKind;
  title: string;
  params: string;
  state: JobState;
  progress: number;
  phase: string;
  error_code: string | null;
  error_message: string | null;
  result: string | null;
  tries: number;
  runs_alone: number;
  follow_up_due: number;
  started_by: number;
  created_at: string;
  started_at: string | null;
  ended_at: string | null;
}

type NamedRow = JobRow & { started_by_name: string };

export type JobChange = Partial<Omit<JobRow, 'id' | 'deposit_id' | 'kind' | 'params' | 'started_by' | 'created_at'>>;

/** A job as its task's maker sees it. */
export interface StoredJob {
  id: number;
  depositId: number;
  kind: JobKind;
  title: string;
  /** As given to `enqueue`; parse it by the kind's own schema. */
  params: unknown;
  startedBy: Person;
}

/** A job that waits for its turn, with what the scheduler weighs. */
export interface WaitingJob {
  id: number;
  depositId: number;
  runsAlone: boolean;
}

export interface NewJob {
  depositId: number;
  kind: JobKind;
  title: string;
  params: object;
  startedById: number;
  createdAt: string;
}

export const WAITING: readonly JobState[] = ['queued', 'interrupted'];
const LATEST = 50;

const Result = Job.shape.result;
const Params = z.unknown();

const toJob = (row: NamedRow): Job => ({
  id: row.id,
  depositId: row.deposit_id,
  kind: row.kind,
  title: row.title,
  state: row.state,
  progress: row.progress,
  phase: row.phase,
  error: row.error_code === null ? null : { code: row.error_code, message: row.error_message ?? '' },
  result: row.result === null ? null : Result.parse(JSON.parse(row.result)),
  startedBy: { id: row.started_by, name: row.started_by_name },
  createdAt: row.created_at,
  startedAt: row.started_at,
  endedAt: row.ended_at,
});

const toStored = (row: NamedRow): StoredJob & { tries: number; runsAlone: boolean } => ({
  id: row.id,
  depositId: row.deposit_id,
  kind: row.kind,
  title: row.title,
  params: Params.parse(JSON.parse(row.params)),
  startedBy: { id: row.started_by, name: row.started_by_name },
  tries: row.tries,
  runsAlone: row.runs_alone === 1,
});

export function jobsRepository(db: Knex) {
  const named = () =>
    db<JobRow>('jobs')
      .join('users', 'users.id', 'jobs.started_by')
      .select<NamedRow[]>('jobs.*', 'users.name as started_by_name');

  const one = async (jobId: number): Promise<NamedRow | undefined> => (await named().where('jobs.id', jobId))[0];

  async function countWaiting(where: { deposit_id?: number }): Promise<number> {
    const [counted] = await db<JobRow>('jobs').where(where).whereIn('state', WAITING).count<{ n: number }[]>({ n: '*' });
    return counted?.n ?? 0;
  }

  return {
    countWaiting,

    async insert(job: NewJob): Promise<number> {
      const [id] = await db<JobRow>('jobs').insert({
        deposit_id: job.depositId, kind: job.kind, title: job.title, params: JSON.stringify(job.params),
        state: 'queued', started_by: job.startedById, created_at: job.createdAt,
      });
      if (id === undefined) throw new Error('the database gave a new job no id');
      return id;
    },

    async latest(depositId: number): Promise<Job[]> {
      return (await named().where({ deposit_id: depositId }).orderBy('jobs.id', 'desc').limit(LATEST)).map(toJob);
    },

    async find(jobId: number): Promise<Job | undefined> {
      const row = await one(jobId);
      return row && toJob(row);
    },

    async stored(jobId: number) {
      const row = await one(jobId);
      return row && toStored(row);
    },

    async waiting(): Promise<WaitingJob[]> {
      const rows = await db<JobRow>('jobs').whereIn('state', WAITING).orderBy('id').select('id', 'deposit_id', 'runs_alone');
      return rows.map((row) => ({ id: row.id, depositId: row.deposit_id, runsAlone: row.runs_alone === 1 }));
    },

    /** Jobs that were running when the server last ended. */
    async running(): Promise<{ id: number; tries: number }[]> {
      return db<JobRow>('jobs').where({ state: 'running' }).select('id', 'tries');
    },

    async withFollowUpDue(): Promise<number[]> {
      return db<JobRow>('jobs').where({ follow_up_due: 1 }).orderBy('id').pluck('id');
    },

    /** Changes a job that is in one of the states; answers whether it was. */
    async change(jobId: number, from: readonly JobState[], change: JobChange): Promise<boolean> {
      const n = await db<JobRow>('jobs').where({ id: jobId }).whereIn('state', from).update(change);
      return n > 0;
    },

    /** Makes the job's tables visible to everybody. */
    async publishTables(jobId: number): Promise<void> {
      await db('column_tables').where({ job_id: jobId, state: 'pending' }).update({ state: 'live' });
    },
  };
}
export type JobsRepository = ReturnType<typeof jobsRepository>;
