import type { Job } from '#contract/jobs.ts';
import type { StopReason } from './jobs.failure.ts';
import type { WaitingJob } from './jobs.repository.ts';

/** A progress event is sent this often at most, and at least once in SILENT_MS. */
const EMIT_EVERY_MS = 250;
const SILENT_MS = 1_000;

/** A running job: what is known of it only here. */
export interface LiveJob extends WaitingJob {
  abort: AbortController;
  stopReason: StopReason | null;
  stop(reason: StopReason): void;
  /** Takes a report of the task; the progress people see never goes back. */
  report: (phase: string, share: number) => void;
  /** The job as people see it now. */
  view(): Job;
  /** Tells again when nothing was told for a second. */
  breathe(): void;
}

export function createLiveJob(turn: WaitingJob, job: Job, emit: (job: Job) => void): LiveJob {
  const abort = new AbortController();
  let { progress, phase } = job;
  let emittedAt = -Infinity;

  function tell(): void {
    emittedAt = performance.now();
    emit(live.view());
  }

  const live: LiveJob = {
    ...turn,
    abort,
    stopReason: null,
    stop(reason) {
      live.stopReason ??= reason;
      abort.abort();
    },
    report(newPhase, share) {
      const isNewPhase = newPhase !== phase;
      phase = newPhase;
      progress = Math.max(progress, Math.min(1, share));
      if (isNewPhase || performance.now() - emittedAt >= EMIT_EVERY_MS) tell();
    },
    view: () => ({ ...job, progress, phase }),
    breathe() {
      if (performance.now() - emittedAt >= SILENT_MS) tell();
    },
  };
  return live;
}

