/**
 * The compute host: a child process of the server that owns the threads. A task that exhausts memory
 * may end this process, which the server outlives and starts again.
 */
import { existsSync } from 'node:fs';
import { extname, join } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { createLanePools, type LanePools } from './host-lanes.ts';
import {
  faultOf, isHostCommand, laneOf,
  type HostCommand, type HostMessage, type HostOptions, type Lane, type TaskCall, type TaskFailure, type TaskOutcome,
} from './task-types.ts';

/** How long a cancelled task may take to stop by itself before its thread is ended. */
const GRACE_MS = 800;
const MEMORY_CHECK_MS = 100;

interface Run {
  id: number;
  lane: Lane;
  cancelFlag: SharedArrayBuffer;
  abort: AbortController;
  threadId: number | null;
  /** Why its thread was ended from here, if it was. */
  endedFor: { kind: 'cancelled' } | { kind: 'memory'; wasAlone: boolean } | null;
}

const extension = extname(fileURLToPath(import.meta.url));
const runs = new Map<number, Run>();

const tellServer = (message: HostMessage): void => void process.send?.(message);

const outOfMemory = (wasAlone: boolean, limitMb: number, cause: string): TaskFailure => ({
  kind: 'compute', code: 'out-of-memory', wasAlone, cause,
  message: `The work needed more memory than the ${limitMb} MiB it may use. Fewer rows, columns or groups need less.`,
});

function failureOf(run: Run, error: unknown, options: HostOptions): TaskFailure {
  const cause = error instanceof Error ? (error.stack ?? error.message) : String(error);
  if (run.endedFor?.kind === 'cancelled') return { kind: 'cancelled' };
  if (run.endedFor?.kind === 'memory') return outOfMemory(run.endedFor.wasAlone, options.memoryLimitMb, cause);
  if (error instanceof Error && 'code' in error && error.code === 'ERR_WORKER_OUT_OF_MEMORY') {
    return outOfMemory(true, options.threadHeapMb, cause);
  }
  if (error instanceof Error && error.message.startsWith('worker exited')) {
    const message = 'The thread that did this work ended before the work did.';
    return { kind: 'compute', code: 'thread-ended', message, wasAlone: true, cause };
  }
  return faultOf(error);
}

/** Ends a run's thread; a run that has none yet leaves the queue. */
function endRun(pools: LanePools, run: Run, reason: NonNullable<Run['endedFor']>): void {
  run.endedFor ??= reason;
  const hadThread = run.threadId !== null && pools.endThread(run.lane, run.threadId);
  if (!hadThread) run.abort.abort();
}

function cancelRun(pools: LanePools, run: Run): void {
  Atomics.store(new Int32Array(run.cancelFlag), 0, 1);
  if (run.threadId === null) {
    endRun(pools, run, { kind: 'cancelled' });
    return;
  }
  setTimeout(() => {
    if (runs.has(run.id)) endRun(pools, run, { kind: 'cancelled' });
  }, GRACE_MS);
}

function taskFile(folder: string, taskName: string): string | null {
  if (!/^[a-z][a-z0-9-]*$/.test(taskName)) return null;
  const file = join(folder, `${taskName}${extension}`);
  return existsSync(file) ? pathToFileURL(file).href : null;
}

async function startRun(
  pools: LanePools, options: HostOptions, runId: number, taskName: string, input: unknown,
): Promise<TaskOutcome<unknown>> {
  const filename = taskFile(options.taskFolder, taskName);
  if (filename === null) {
    const message = `There is no task ${taskName}.`;
    return { ok: false, failure: { kind: 'compute', code: 'no-such-task', message, wasAlone: true, cause: message } };
  }
  const cancelFlag = new SharedArrayBuffer(Int32Array.BYTES_PER_ELEMENT);
  const run: Run = { id: runId, lane: laneOf(taskName), cancelFlag, abort: new AbortController(), threadId: null, endedFor: null };
  runs.set(runId, run);
  const { databaseFile, dataDir } = options;
  const call: TaskCall<unknown> = { runId, input, cancelFlag, databaseFile, dataDir };
  try {
    return await pools.pool(run.lane).run(call, { filename, signal: run.abort.signal });
  } catch (error) {
    return { ok: false, failure: failureOf(run, error, options) };
  } finally {
    runs.delete(runId);
  }
}

/** Typed arrays lie outside any heap limit: the process watches what it really holds. */
function watchMemory(pools: LanePools, { memoryLimitMb }: HostOptions): void {
  setInterval(() => {
    const heldMb = process.memoryUsage.rss() / 2 ** 20;
    const heavy = [...runs.values()].filter(({ lane }) => lane !== 'sign-in');
    if (heavy.length === 0 && heldMb > memoryLimitMb / 2) pools.renew('jobs');
    if (heldMb <= memoryLimitMb) return;
    for (const run of heavy) endRun(pools, run, { kind: 'memory', wasAlone: heavy.length === 1 });
  }, MEMORY_CHECK_MS);
}

function serve(options: HostOptions): (command: HostCommand) => void {
  const pools = createLanePools(options, (message) => {
    const run = runs.get(message.runId);
    if (!run) return;
    if (message.type === 'started') run.threadId = message.threadId;
    else tellServer(message);
  });
  pools.pool('sign-in');
  watchMemory(pools, options);
  tellServer({ type: 'ready' });
  return (command) => {
    if (command.type === 'run') {
      const { runId, taskName, input } = command;
      void startRun(pools, options, runId, taskName, input).then((outcome) => {
        tellServer({ type: 'ended', runId, outcome });
      });
    }
    const run = command.type === 'cancel' ? runs.get(command.runId) : undefined;
    if (run) cancelRun(pools, run);
  };
}

let handle: ((command: HostCommand) => void) | null = null;
process.on('message', (message: unknown) => {
  if (!isHostCommand(message)) return;
  if (message.type === 'start') handle = serve(message.options);
  else handle?.(message);
});
// The server is gone: nothing here may go on writing.
process.on('disconnect', () => process.exit(0));
// An interrupt from the keyboard reaches the whole group; the server decides when this process ends.
process.on('SIGINT', () => undefined);
