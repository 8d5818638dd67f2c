import type { Job } from '#contract/jobs.ts';
import { createStore, useStore } from '#src/lib/store.ts';
import { problemText } from '#src/lib/toasts.ts';
import type { PlannedLoad } from './load-plan.ts';

export type StepState = 'waiting' | 'loading' | 'done' | 'failed' | 'left';

export interface LoadStep {
  uploadId: number;
  fileName: string;
  mode: PlannedLoad['mode'];
  effect: string;
  state: StepState;
  job: Job | null;
  message: string | null;
}

export interface LoadRun {
  steps: readonly LoadStep[];
  isRunning: boolean;
  isStopping: boolean;
}

export interface LoadCalls {
  start: (uploadId: number, mode: PlannedLoad['mode']) => Promise<Job>;
  read: (jobId: number) => Promise<Job>;
  cancel: (jobId: number) => Promise<unknown>;
  pause: () => Promise<void>;
}

const runs = createStore<ReadonlyMap<number, LoadRun>>(new Map());

export const useLoadRun = (depositId: number): LoadRun | undefined => useStore(runs).get(depositId);

function setRun(depositId: number, change: (run: LoadRun) => LoadRun): void {
  const run = runs.get().get(depositId);
  if (run) runs.set(new Map(runs.get()).set(depositId, change(run)));
}

export function dismissRun(depositId: number): void {
  const next = new Map(runs.get());
  next.delete(depositId);
  runs.set(next);
}

const isOver = ({ state }: Job): boolean => state === 'done' || state === 'failed' || state === 'cancelled';

/** Loads one file and waits for its job. Answers whether the run may go on. */
async function runStep(depositId: number, step: LoadStep, calls: LoadCalls): Promise<boolean> {
  const set = (change: Partial<LoadStep>): void =>
    setRun(depositId, (run) => ({ ...run, steps: run.steps.map((other) => (other.uploadId === step.uploadId ? { ...other, ...change } : other)) }));
  set({ state: 'loading' });
  try {
    let job = await calls.start(step.uploadId, step.mode);
    set({ job });
    let hasAskedToStop = false;
    while (!isOver(job)) {
      await calls.pause();
      if (runs.get().get(depositId)?.isStopping && !hasAskedToStop) {
        hasAskedToStop = true;
        await calls.cancel(job.id);
      }
      job = await calls.read(job.id);
      set({ job });
    }
    if (job.state === 'done') set({ state: 'done' });
    else set({ state: job.state === 'failed' ? 'failed' : 'left', message: job.error?.message ?? 'cancelled' });
    return job.state === 'done';
  } catch (error) {
    set({ state: 'failed', message: problemText(error) });
    return false;
  }
}

/**
 * Loads planned files one after the other: each is checked against the tables before it. Stops at
 * the first that fails; what is loaded stays. Goes on while other pages are open.
 */
export async function runLoads(depositId: number, plan: readonly PlannedLoad[], calls: LoadCalls): Promise<void> {
  if (runs.get().get(depositId)?.isRunning) return;
  const steps = plan.map(({ upload, mode, effect }): LoadStep => ({
    uploadId: upload.id, fileName: upload.fileName, mode, effect, state: 'waiting', job: null, message: null,
  }));
  runs.set(new Map(runs.get()).set(depositId, { steps, isRunning: true, isStopping: false }));
  for (const step of steps) {
    if (runs.get().get(depositId)?.isStopping || !(await runStep(depositId, step, calls))) break;
  }
  setRun(depositId, (run) => ({
    ...run,
    isRunning: false,
    isStopping: false,
    steps: run.steps.map((step) => (step.state === 'waiting' ? { ...step, state: 'left' } : step)),
  }));
}

export const stopRun = (depositId: number): void => setRun(depositId, (run) => ({ ...run, isStopping: true }));
