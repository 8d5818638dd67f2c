import { parentPort, threadId } from 'node:worker_threads';
import { KernelError } from '#kernels/kernel-error.ts';
import type { ColumnStore } from '#server/db/column-store.ts';
import { lazyStore } from './store-access.ts';
import { Cancelled, faultOf, type HostPaths, type TaskCall, type TaskOutcome, type ThreadMessage } from './task-types.ts';

export interface TaskContext extends HostPaths {
  /**
   * Tells people how far the work is: a phase in words and the share of the whole task, 0 to 1.
   * Call it at least several times a second.
   *
   * @throws {Cancelled} when somebody asked to stop; let it pass.
   */
  report: (phase: string, share: number) => void;
  /** The task's own connection, opened at the first call and closed for it at the end. */
  store: () => ColumnStore;
}

export type TaskBody<In, Out> = (input: In, context: TaskContext) => Out | Promise<Out>;
export type Task<In, Out> = (call: TaskCall<In>) => Promise<TaskOutcome<Out>>;

const REPORT_EVERY_MS = 100;
const tellHost = (message: ThreadMessage): void => parentPort?.postMessage(message);

function reporter(runId: number, cancelFlag: SharedArrayBuffer): TaskContext['report'] {
  const flag = new Int32Array(cancelFlag);
  let lastPhase = '';
  let lastAt = -Infinity;
  return (phase, share) => {
    if (Atomics.load(flag, 0) === 1) throw new Cancelled();
    const now = performance.now();
    if (phase === lastPhase && now - lastAt < REPORT_EVERY_MS) return;
    lastPhase = phase;
    lastAt = now;
    tellHost({ type: 'progress', runId, phase, share });
  };
}

/**
 * Makes a task of a function: the default export of `workers/tasks/<name>.ts`. What it throws, a
 * kernel's refusal, a cancellation or a fault, goes back as data: not every error survives the copy.
 *
 * Cancel: `report` reads a flag in shared memory and throws `Cancelled`; a thread that never reports
 * is ended.
 */
export function defineTask<In, Out>(body: TaskBody<In, Out>): Task<In, Out> {
  return async ({ runId, input, cancelFlag, databaseFile, dataDir }) => {
    const access = lazyStore(databaseFile);
    tellHost({ type: 'started', runId, threadId });
    try {
      const report = reporter(runId, cancelFlag);
      const output = await body(input, { report, store: access.open, databaseFile, dataDir });
      return { ok: true, output };
    } catch (error) {
      if (error instanceof Cancelled) return { ok: false, failure: { kind: 'cancelled' } };
      if (!(error instanceof KernelError)) return { ok: false, failure: faultOf(error) };
      const { code, message, detail } = error;
      return { ok: false, failure: { kind: 'kernel', code, message, detail } };
    } finally {
      access.close();
    }
  };
}
