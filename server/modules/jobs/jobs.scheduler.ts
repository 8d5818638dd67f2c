import type { Job } from '#contract/jobs.ts';
import { transact } from '#server/db/transact.ts';
import { MAX_TRIES, type StopReason } from './jobs.failure.ts';
import type { JobKinds } from './jobs.kinds.ts';
import { createLiveJob, type LiveJob } from './jobs.live.ts';
import { jobsRepository, WAITING, type JobChange, type WaitingJob } from './jobs.repository.ts';
import { createRunner, type RunnerDeps } from './jobs.runner.ts';
import { nextInTurn } from './jobs.turn.ts';

interface SchedulerDeps extends RunnerDeps {
  kinds: JobKinds;
  /** Jobs running at one time. */
  slots: number;
  emit: (job: Job) => void;
}

export interface Scheduler {
  /** Starts what can start. Called whenever something may have changed. */
  pump(): void;
  /** The running job as people see it, if it runs. */
  viewOf(jobId: number): Job | undefined;
  /** Stops a running job and waits for its end; false when it does not run. */
  stop(jobId: number, reason: StopReason): Promise<boolean>;
  /** Takes up what the last run of the server left, then starts. */
  recover(): Promise<void>;
  /** Stops everything so that the next start takes it up. */
  close(): Promise<void>;
}

const BREATH_MS = 500;
const POISON = {
  code: 'stopped-twice',
  message: 'The service stopped twice while this work ran; it was not tried again.',
};

export function createScheduler({ kinds, slots, emit, ...deps }: SchedulerDeps): Scheduler {
  const { db, clock, log } = deps;
  const repository = jobsRepository(db);
  const runner = createRunner(deps);
  const running = new Map<number, { live: LiveJob; settled: Promise<void> }>();
  let lastDepositId = 0;
  let isClosed = false;
  let pumping: Promise<void> = Promise.resolve();

  const breath = setInterval(() => {
    for (const { live } of running.values()) live.breathe();
  }, BREATH_MS);
  breath.unref();

  const change = (jobId: number, from: Parameters<typeof repository.change>[1], to: JobChange): Promise<boolean> =>
    transact(db, (trx) => jobsRepository(trx).change(jobId, from, to));

  async function emitNow(jobId: number): Promise<void> {
    const job = await repository.find(jobId);
    if (job) emit(job);
  }

  /** Marks the job as running and sets it off; false when it was cancelled meanwhile. */
  async function startJob(turn: WaitingJob): Promise<boolean> {
    const before = await repository.stored(turn.id);
    const kind = before && kinds.find(before.kind);
    if (!before || !kind) {
      await change(turn.id, WAITING, {
        state: 'failed', error_code: 'unknown-kind', error_message: 'This version does not know this kind of work.', ended_at: clock().toISOString(),
      });
      await emitNow(turn.id);
      return false;
    }
    const isRepeat = before.tries > 0 || (await repository.find(turn.id))?.state === 'interrupted';
    const job = { ...before, tries: before.tries + 1 };
    const isOurs = await change(turn.id, WAITING, {
      state: 'running', started_at: clock().toISOString(), tries: job.tries, progress: 0, phase: 'start', error_code: null, error_message: null,
    });
    const seen = isOurs ? await repository.find(turn.id) : undefined;
    if (!seen) return false;
    const live = createLiveJob(turn, seen, emit);
    const work = async (): Promise<void> => {
      if (isRepeat) await runner.dropTables(job.id);
      // What a stopping service gives back is for the next start, not for this one again.
      if (!(await runner.run(live, kind, job))) isClosed = true;
      const ended = await repository.find(job.id);
      if (ended?.state === 'done' && kind.after) await runner.followUp(kind, job);
      running.delete(job.id);
      if (ended) emit(ended);
      pump();
    };
    emit(seen);
    const settled = work().catch((error: unknown) => {
      running.delete(job.id);
      log.error({ event: 'job.unsettled', jobId: job.id, err: error }, 'a job could not be settled');
    });
    running.set(job.id, { live, settled });
    return true;
  }

  async function fill(): Promise<void> {
    while (!isClosed && running.size < slots) {
      const lives = [...running.values()].map(({ live }) => live);
      const next = nextInTurn(await repository.waiting(), lives, lastDepositId);
      if (!next) return;
      lastDepositId = next.depositId;
      await startJob(next);
    }
  }

  function pump(): void {
    pumping = pumping.then(fill).catch((error: unknown) => {
      log.error({ event: 'jobs.pump-failed', err: error }, 'waiting jobs could not be started');
    });
  }

  async function interruptLeftRunning(): Promise<void> {
    for (const { id, tries } of await repository.running()) {
      if (running.has(id)) continue;
      const isPoison = tries >= MAX_TRIES;
      const end: JobChange = isPoison
        ? { state: 'failed', error_code: POISON.code, error_message: POISON.message, ended_at: clock().toISOString() }
        : { state: 'interrupted', progress: 0 };
      await change(id, ['running'], end);
      log.warn({ event: 'job.interrupted', jobId: id, tries, isPoison }, 'a job was running when the service last ended');
    }
  }

  async function followUpsDue(): Promise<void> {
    for (const jobId of await repository.withFollowUpDue()) {
      const job = await repository.stored(jobId);
      const kind = job && kinds.find(job.kind);
      if (kind) await runner.followUp(kind, job);
    }
  }

  return {
    pump,
    viewOf: (jobId) => running.get(jobId)?.live.view(),
    async stop(jobId, reason) {
      // A job on its way from waiting to running is in neither place: let it arrive.
      if (!running.has(jobId)) await pumping;
      const found = running.get(jobId);
      found?.live.stop(reason);
      await found?.settled;
      return found !== undefined;
    },
    async recover() {
      await interruptLeftRunning();
      await followUpsDue();
      void runner.dropTables(null);
      pump();
    },
    async close() {
      isClosed = true;
      clearInterval(breath);
      await pumping;
      const all = [...running.values()];
      for (const { live } of all) live.stop('stopping');
      await Promise.all(all.map(({ settled }) => settled));
    },
  };
}
