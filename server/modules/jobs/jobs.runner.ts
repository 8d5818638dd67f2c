import type { Knex } from 'knex';
import { transact } from '#server/db/transact.ts';
import type { Clock } from '#server/lib/clock.ts';
import type { Log } from '#server/lib/log.ts';
import type { Compute } from '#workers/client.ts';
import type { DropTablesInput, DropTablesOutput } from '#workers/tasks/drop-tables.ts';
import { endingOf } from './jobs.failure.ts';
import type { RunnableKind } from './jobs.kinds.ts';
import type { LiveJob } from './jobs.live.ts';
import { jobsRepository, type JobsRepository, type StoredJob } from './jobs.repository.ts';

export interface RunnerDeps {
  db: Knex;
  compute: Compute;
  clock: Clock;
  log: Log;
}

export interface Runner {
  /**
   * Runs a job that is marked as running, to an end that is written down. Never rejects.
   *
   * @returns False when the service is stopping, so that nothing more should start.
   */
  run(live: LiveJob, kind: RunnableKind, job: StoredJob & { tries: number }): Promise<boolean>;
  /** Removes the unpublished tables of a job, or of all that ended; a failure is only logged. */
  dropTables(jobId: number | null): Promise<void>;
  /** Asks for what follows a job that is done, then notes that it was asked for. */
  followUp(kind: RunnableKind, job: StoredJob): Promise<void>;
}

export function createRunner({ db, compute, clock, log }: RunnerDeps): Runner {
  const write = <Result>(work: (jobs: JobsRepository, trx: Knex.Transaction) => Promise<Result>): Promise<Result> =>
    transact(db, (trx) => work(jobsRepository(trx), trx));

  async function dropTables(jobId: number | null): Promise<void> {
    try {
      await compute.run<DropTablesInput, DropTablesOutput>('drop-tables', { jobId });
    } catch (error) {
      log.warn({ event: 'job.tables-left', jobId, err: error }, 'unpublished tables stay until the next start');
    }
  }

  async function followUp(kind: RunnableKind, job: StoredJob): Promise<void> {
    try {
      await kind.after?.(job);
      await write((jobs) => jobs.change(job.id, ['done'], { follow_up_due: 0 }));
    } catch (error) {
      log.error({ event: 'job.follow-up-failed', jobId: job.id, err: error }, 'what follows a job could not be asked for');
    }
  }

  async function finish(live: LiveJob, kind: RunnableKind, job: StoredJob, keep: Awaited<ReturnType<RunnableKind['run']>>) {
    await write(async (jobs, trx) => {
      await jobs.publishTables(job.id);
      const result = await keep(trx);
      const isOurs = await jobs.change(job.id, ['running'], {
        state: 'done', progress: 1, phase: live.view().phase, result: JSON.stringify(result),
        ended_at: clock().toISOString(), follow_up_due: kind.after ? 1 : 0,
      });
      if (!isOurs) throw new Error(`job ${job.id} is no longer running`);
    });
  }

  async function fail(live: LiveJob, kind: RunnableKind, job: StoredJob & { tries: number }, error: unknown): Promise<boolean> {
    const end = endingOf(error, live.stopReason, job.tries, kind.timeLimitMs);
    if (end.isFault) {
      const cause = error instanceof Error ? error.cause : undefined;
      log.error({ event: 'job.fault', jobId: job.id, kind: job.kind, err: error, cause }, 'a job met a fault');
    }
    const { progress, phase } = live.view();
    const isEnded = end.state !== 'interrupted';
    await write((jobs) =>
      jobs.change(job.id, ['running'], {
        state: end.state, phase, progress: isEnded ? progress : 0,
        error_code: end.error?.code ?? null, error_message: end.error?.message ?? null,
        ended_at: isEnded ? clock().toISOString() : null,
        runs_alone: end.runsAlone ? 1 : 0,
        tries: end.givesTryBack ? job.tries - 1 : job.tries,
      }),
    );
    if (isEnded) void dropTables(job.id);
    return !end.givesTryBack;
  }

  return {
    dropTables,
    followUp,
    async run(live, kind, job) {
      const limit = setTimeout(() => live.stop('time-limit'), kind.timeLimitMs);
      try {
        const keep = await kind.run(job, { signal: live.abort.signal, onProgress: live.report });
        await finish(live, kind, job, keep);
        return true;
      } catch (error) {
        // A write that fails here as well leaves the job as running: the next start takes it up.
        return await fail(live, kind, job, error).catch((worse: unknown) => {
          log.error({ event: 'job.unwritten', jobId: job.id, err: worse }, 'the end of a job could not be written');
          return true;
        });
      } finally {
        clearTimeout(limit);
      }
    },
  };
}
