import type { Knex } from 'knex';
import type { Job, JobKind } from '#contract/jobs.ts';
import type { Compute, RunOptions } from '#workers/client.ts';
import type { StoredJob } from './jobs.repository.ts';
import { runParts, type Parts } from './run-parts.ts';

export type JobResult = NonNullable<Job['result']>;

/** What a module tells of a kind of job it owns. */
export interface JobKindSpec<In, Out> {
  /** Name of the task that does the work. */
  task: string;
  /** Makes the task's input when the job's turn comes: references, not numbers. */
  prepare(this: void, job: StoredJob): In | Promise<In>;
  /**
   * Keeps what the task made, in one short transaction together with publishing its tables. May run
   * again when the database was busy, and touches nothing but the transaction: the pool has one
   * connection, and this is it.
   */
  finish(this: void, trx: Knex.Transaction, job: StoredJob, output: Out): JobResult | Promise<JobResult>;
  /** Asks for work that follows. Runs once the job is done, again after a crash: must bear repeating. */
  after?(this: void, job: StoredJob): Promise<void>;
  /** Divides the work among the threads; the answer must not depend on how many there are. */
  parts?: Parts<In, Out>;
  /** Longest the work may take; an hour if left out. */
  timeLimitMs?: number;
}

/** A kind with its types folded away: run the task, get the way to finish. */
export interface RunnableKind {
  timeLimitMs: number;
  run(job: StoredJob, options: RunOptions): Promise<(trx: Knex.Transaction) => Promise<JobResult>>;
  after: ((job: StoredJob) => Promise<void>) | null;
}

const DEFAULT_TIME_LIMIT_MS = 3_600_000;

export interface JobKinds {
  register<In, Out>(kind: JobKind, spec: JobKindSpec<In, Out>): void;
  find(kind: JobKind): RunnableKind | undefined;
}

export function createJobKinds(compute: Compute): JobKinds {
  const kinds = new Map<JobKind, RunnableKind>();

  async function outputOf<In, Out>({ task, parts }: JobKindSpec<In, Out>, input: In, options: RunOptions): Promise<Out> {
    const inputs = parts?.split(input, compute.threads) ?? [];
    if (!parts || inputs.length < 2) return compute.run<In, Out>(task, input, options);
    const [first, ...others] = await runParts(inputs, (part, own) => compute.run<In, Out>(task, part, own), options);
    if (first === undefined) throw new Error(`task ${task} was divided into nothing`);
    return parts.join([first, ...others]);
  }

  return {
    register<In, Out>(kind: JobKind, spec: JobKindSpec<In, Out>): void {
      if (kinds.has(kind)) throw new Error(`jobs of kind ${kind} are registered twice`);
      kinds.set(kind, {
        timeLimitMs: spec.timeLimitMs ?? DEFAULT_TIME_LIMIT_MS,
        after: spec.after ?? null,
        async run(job, options) {
          const output = await outputOf(spec, await spec.prepare(job), options);
          return async (trx) => spec.finish(trx, job, output);
        },
      });
    },
    find: (kind) => kinds.get(kind),
  };
}
