import type { Knex } from 'knex';
import * as z from 'zod';
import type { Job, JobKind } from '#contract/jobs.ts';
import { openDb } from '#server/db/knex.ts';
import { createLog } from '#server/lib/log.ts';
import { createEvents, type Events } from '#server/modules/jobs/events.ts';
import { createJobsService, type JobsService } from '#server/modules/jobs/jobs.service.ts';
import { chunksOf } from '#server/modules/jobs/run-parts.ts';
import { insertPeople, type TestPeople } from '#tests/support/people.ts';
import { tempInstance } from '#tests/support/temp-instance.ts';
import { testCompute } from '#tests/workers/test-compute.ts';
import type { Compute } from '#workers/client.ts';
import type { WriteColumnsInput } from '../../../workers/test-tasks/write-columns.ts';

const WriteParams = z.object({ nRows: z.number(), nColumns: z.number() });
const CountParams = z.object({ ms: z.number() });

/** Every kind stands for a way a task may behave. */
export function registerTestKinds(jobs: JobsService): { followed: number[] } {
  const followed: number[] = [];
  const resultOf = (kind: string) => (_trx: Knex.Transaction, { id }: { id: number }) => ({ kind, id });

  jobs.register<WriteColumnsInput, { tableId: number }>('components', {
    task: 'write-columns',
    prepare: ({ id, params }) => ({ jobId: id, ...WriteParams.parse(params) }),
    async finish(trx, job, { tableId }) {
      await trx('job_effects').insert({ job_id: job.id });
      return { kind: 'component-run', id: tableId };
    },
  });
  jobs.register<{ ms: number }, unknown>('grouping', {
    task: 'count-slowly',
    prepare: ({ params }) => CountParams.parse(params),
    finish: resultOf('grouping'),
  });
  jobs.register<{ row: number }, unknown>('screen', { task: 'refuse', prepare: () => ({ row: 3 }), finish: resultOf('screen') });
  jobs.register<null, unknown>('sweep', { task: 'grow-one-array', prepare: () => null, finish: resultOf('sweep') });
  jobs.register<null, unknown>('zones', { task: 'exit', prepare: () => null, finish: resultOf('zone-run') });
  jobs.register<null, unknown>('evidence', { task: 'fault', prepare: () => null, finish: resultOf('evidence') });
  jobs.register<null, unknown>('codes', { task: 'loop-forever', timeLimitMs: 700, prepare: () => null, finish: resultOf('code-set') });
  jobs.register<WriteColumnsInput, { tableId: number }>('assemble', {
    task: 'write-columns',
    prepare: ({ id }) => ({ jobId: id, nRows: 10, nColumns: 1 }),
    async finish(trx, job) {
      await trx('job_effects').insert({ job_id: job.id });
      throw new Error('the disk is full');
    },
  });
  jobs.register<string, unknown>('load-file', {
    task: 'echo',
    prepare: () => 'loaded',
    finish: resultOf('revision'),
    after({ id }) {
      followed.push(id);
      return Promise.resolve();
    },
  });
  // Gives back its digits as one number, from as many parts as there are threads.
  jobs.register<number[], number[]>('check-file', {
    task: 'echo',
    prepare: () => [1, 2, 3, 4],
    parts: { split: (digits, count) => chunksOf(digits, count), join: (outputs) => outputs.flat() },
    finish: (_trx, _job, digits) => ({ kind: 'upload', id: Number(digits.join('')) }),
  });
  return { followed };
}

export interface JobHarness {
  db: Knex;
  databaseFile: string;
  people: TestPeople;
  compute: Compute;
  events: Events;
  jobs: JobsService;
  /** Ids of jobs whose follow-up was asked for. */
  followed: number[];
  enqueue(kind: JobKind, params?: object, depositId?: number): Promise<Job>;
  /** Enqueues and waits for the end. */
  runToEnd(kind: JobKind, params?: object): Promise<Job>;
  tablesOf(jobId: number): Promise<{ state: string }[]>;
  effectsOf(jobId: number): Promise<number>;
  close(): Promise<void>;
}

/** A jobs service on a fresh migrated database and a real compute host with the test tasks. */
export async function jobHarness(): Promise<JobHarness> {
  const { env, remove } = await tempInstance();
  const databaseFile = env.paths.database;
  const db = openDb(databaseFile);
  await db.schema.raw('CREATE TABLE job_effects (job_id INTEGER NOT NULL)');
  const people = await insertPeople(db, env, () => new Date());
  const compute = testCompute(env.paths.root, databaseFile);
  const events = createEvents();
  const jobs = createJobsService({ db, compute, events, log: createLog('silent') });
  const { followed } = registerTestKinds(jobs);
  const actor = people.of('geologist');

  const enqueue = (kind: JobKind, params: object = {}, depositId = people.depositId): Promise<Job> =>
    jobs.enqueue({ depositId, kind, title: `Test ${kind}`, params, actor });
  return {
    db, databaseFile, people, compute, events, jobs, followed, enqueue,
    runToEnd: async (kind, params) => jobs.waitFor((await enqueue(kind, params)).id),
    tablesOf: (jobId) => db('column_tables').where({ job_id: jobId }).select('state'),
    effectsOf: async (jobId) => (await db('job_effects').where({ job_id: jobId })).length,
    async close() {
      await jobs.close();
      await compute.close();
      await db.destroy();
      remove();
    },
  };
}

/** Waits until `check` holds, at most a minute: a busy machine starts a host slowly. */
export async function until(check: () => Promise<boolean> | boolean): Promise<void> {
  const endsAt = performance.now() + 60_000;
  while (!(await check())) {
    if (performance.now() > endsAt) throw new Error('what was waited for did not come');
    await new Promise((resolve) => setTimeout(resolve, 20));
  }
}
