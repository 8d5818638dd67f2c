import { availableParallelism, totalmem } from 'node:os';
import { resolve } from 'node:path';
import { fileURLToPath } from 'node:url';
import { KernelError } from '#kernels/kernel-error.ts';
import { startHost, type HostEnd, type HostLog } from './host-process.ts';
import {
  Cancelled, ComputeError, laneOf,
  type HostMessage, type HostPaths, type TaskFailure, type TaskOutcome,
} from './task-types.ts';

export { Cancelled, ComputeError } from './task-types.ts';

export interface ComputeOptions extends HostPaths {
  /** Threads for long work, 1 or 2. */
  threads: number;
  log?: HostLog;
  /** Where the task files are; the project's own unless a test has others. */
  taskFolder?: string;
  memoryLimitMb?: number;
  threadHeapMb?: number;
}

export interface RunOptions {
  /** Stops the work: within a second if it reports, else its thread is ended. */
  signal?: AbortSignal;
  onProgress?: (phase: string, share: number) => void;
}

export interface Compute {
  /** Threads for long work: more parts of one job than these would only keep others waiting. */
  readonly threads: number;
  /**
   * Runs `workers/tasks/<taskName>.ts` on a thread.
   *
   * @throws {KernelError} what the task refused; {Cancelled} after the signal; {ComputeError} when
   *   the work ended without an answer.
   */
  run<In, Out>(taskName: string, input: In, options?: RunOptions): Promise<Out>;
  /** Resolves once the host can take work. */
  ready(): Promise<void>;
  isHealthy(): boolean;
  /** Ends the host; work still running is rejected as `closed`. */
  close(): Promise<void>;
}

interface Pending {
  runId: number;
  taskName: string;
  input: unknown;
  signal: AbortSignal | undefined;
  onProgress: RunOptions['onProgress'];
  settle: (outcome: TaskOutcome<unknown>) => void;
  /** Short tasks have no effect but their answer: they are run again when the host ends under them. */
  triesLeft: number;
  isSent: boolean;
}

const DEFAULT_THREAD_HEAP_MB = 2_048;
/** Three fifths of the machine, at most 8 GiB: the server and the database's file cache need the rest. */
const defaultMemoryLimitMb = (): number => Math.min(8_192, Math.floor((0.6 * totalmem()) / 2 ** 20));
const TRIES_OF_SHORT_TASKS = 3;
/** A host that does not answer a cancellation in this time is ended itself. */
const CANCEL_LIMIT_MS = 1_800;

export function createCompute(options: ComputeOptions): Compute {
  const pending = new Map<number, Pending>();
  const threads = Math.min(options.threads, Math.max(1, availableParallelism()));
  let nextRunId = 1;

  const host = startHost(
    {
      databaseFile: resolve(options.databaseFile),
      dataDir: resolve(options.dataDir),
      threads,
      taskFolder: options.taskFolder ?? fileURLToPath(new URL('./tasks/', import.meta.url)),
      memoryLimitMb: options.memoryLimitMb ?? defaultMemoryLimitMb(),
      threadHeapMb: options.threadHeapMb ?? DEFAULT_THREAD_HEAP_MB,
    },
    { onMessage: receive, onReady: sendAll, onEnd: failAll, log: options.log },
  );

  function settle(runId: number, outcome: TaskOutcome<unknown>): void {
    const run = pending.get(runId);
    pending.delete(runId);
    run?.settle(outcome);
  }

  function receive(message: HostMessage): void {
    if (message.type === 'progress') pending.get(message.runId)?.onProgress?.(message.phase, message.share);
    if (message.type === 'ended') settle(message.runId, message.outcome);
  }

  function send(run: Pending): void {
    const { runId, taskName, input } = run;
    run.isSent = true;
    host.send({ type: 'run', runId, taskName, input });
  }

  function sendAll(): void {
    for (const run of pending.values()) send(run);
  }

  /** The host ended: what it had fails; what it had not, and short tasks, wait for the next one. */
  function failAll({ code, message, comesBack }: HostEnd): void {
    const lost = [...pending.values()].filter(({ isSent }) => isSent || !comesBack);
    const nHeavy = lost.filter(({ taskName }) => laneOf(taskName) !== 'sign-in').length;
    for (const run of lost) {
      run.isSent = false;
      run.triesLeft -= 1;
      if (comesBack && run.triesLeft > 0) continue;
      settle(run.runId, { ok: false, failure: { kind: 'compute', code, message, wasAlone: nHeavy <= 1, cause: message } });
    }
  }

  function cancel(run: Pending): void {
    if (!host.isReady()) {
      settle(run.runId, { ok: false, failure: { kind: 'cancelled' } });
      return;
    }
    host.send({ type: 'cancel', runId: run.runId });
    setTimeout(() => {
      if (pending.has(run.runId)) host.kill();
    }, CANCEL_LIMIT_MS).unref();
  }

  return {
    threads,
    async run<In, Out>(taskName: string, input: In, { signal, onProgress }: RunOptions = {}): Promise<Out> {
      if (host.isClosed()) throw new ComputeError('closed', 'The service is stopping.', true);
      if (signal?.aborted) throw new Cancelled();
      const triesLeft = laneOf(taskName) === 'sign-in' ? TRIES_OF_SHORT_TASKS : 1;
      const outcome = await new Promise<TaskOutcome<unknown>>((settleRun) => {
        const run: Pending = { runId: nextRunId++, taskName, input, signal, onProgress, settle: settleRun, triesLeft, isSent: false };
        pending.set(run.runId, run);
        signal?.addEventListener('abort', () => pending.has(run.runId) && cancel(run), { once: true });
        if (host.isReady()) send(run);
      });
      if (signal?.aborted) throw new Cancelled();
      if (!isOutcomeOf<Out>(outcome)) throw new Error(`task ${taskName} gave no outcome`);
      if (!outcome.ok) throw errorOf(outcome.failure);
      return outcome.output;
    },
    ready: () => host.ready(),
    isHealthy: () => host.isReady(),
    close: () => host.close(),
  };
}

/** Task and caller name the same types; the processes between them run the same code. */
const isOutcomeOf = <Out>(outcome: TaskOutcome<unknown>): outcome is TaskOutcome<Out> => 'ok' in outcome;

function errorOf(failure: TaskFailure): Error {
  if (failure.kind === 'cancelled') return new Cancelled();
  if (failure.kind === 'kernel') return new KernelError(failure.code, failure.message, failure.detail);
  return new ComputeError(failure.code, failure.message, failure.wasAlone, failure.cause);
}

