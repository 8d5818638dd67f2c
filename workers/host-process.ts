import { fork, type ChildProcess } from 'node:child_process';
import { createRequire } from 'node:module';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { isHostMessage, type HostCommand, type HostMessage, type HostOptions } from './task-types.ts';

/** As much of a logger as the compute client needs. */
export interface HostLog {
  warn(fields: object, message: string): void;
}

export interface HostEnd {
  code: 'host-ended' | 'closed';
  message: string;
  /** Another process is on its way. */
  comesBack: boolean;
}

export interface HostEvents {
  onMessage: (message: HostMessage) => void;
  onReady: () => void;
  onEnd: (end: HostEnd) => void;
  log: HostLog | undefined;
}

/** The host process, started again whenever it ends by itself. */
export interface HostHandle {
  send(command: HostCommand): void;
  ready(): Promise<void>;
  isReady(): boolean;
  isClosed(): boolean;
  /** Ends the process at once; another one follows. */
  kill(): void;
  close(): Promise<void>;
}

const isSource = import.meta.url.endsWith('.ts');
const hostFile = fileURLToPath(new URL(isSource ? './host.ts' : './host.js', import.meta.url));

/** From sources, processes and threads need the TypeScript loader, found wherever the server was started. */
const loaderFlags = (): string[] =>
  isSource ? ['--import', pathToFileURL(createRequire(import.meta.url).resolve('tsx')).href] : [];

/** Heap of the host's own thread, which only passes messages. */
const HOST_HEAP_MB = 512;
const CLOSE_LIMIT_MS = 2_000;
const MAX_FAILED_STARTS = 5;
const FIRST_WAIT_MS = 200;

/** Nothing of the server's settings, secrets least of all, goes into the process. */
const INHERITED = ['PATH', 'HOME', 'TMPDIR', 'TMP', 'TEMP', 'LANG', 'TZ', 'NODE_ENV', 'SYSTEMROOT'];
const hostEnvironment = (): NodeJS.ProcessEnv =>
  Object.fromEntries(Object.entries(process.env).filter(([name]) => INHERITED.includes(name)));

const endedBy = (exitCode: number | null, signal: string | null): string =>
  `The process that did this work ended (${signal ?? `exit code ${exitCode}`}), most likely for want of memory.`;

export function startHost(given: Omit<HostOptions, 'threadFlags'>, events: HostEvents): HostHandle {
  const options: HostOptions = { ...given, threadFlags: loaderFlags() };
  let child: ChildProcess | null = null;
  let isReady = false;
  let isClosed = false;
  let failedStarts = 0;
  const readyWaiters: { resolve: () => void; reject: (error: Error) => void }[] = [];

  function receive(message: unknown): void {
    if (!isHostMessage(message)) return;
    if (message.type !== 'ready') {
      events.onMessage(message);
      return;
    }
    isReady = true;
    failedStarts = 0;
    for (const { resolve } of readyWaiters.splice(0)) resolve();
    events.onReady();
  }

  function ended(exitCode: number | null, signal: string | null): void {
    if (!isReady) failedStarts += 1;
    child = null;
    isReady = false;
    if (isClosed) return;
    events.log?.warn({ event: 'compute.host-ended', exitCode, signal, failedStarts }, 'the compute host ended and is started again');
    const comesBack = failedStarts < MAX_FAILED_STARTS;
    events.onEnd({ code: 'host-ended', message: endedBy(exitCode, signal), comesBack });
    if (!comesBack) {
      const error = new Error(`the compute host failed to start ${failedStarts} times`);
      for (const { reject } of readyWaiters.splice(0)) reject(error);
    }
    const waitMs = failedStarts === 0 ? 0 : FIRST_WAIT_MS * 2 ** Math.min(failedStarts, 5);
    setTimeout(start, waitMs).unref();
  }

  /** What the engine prints when it ends for want of memory belongs in the log. */
  function passOn(text: string): void {
    if (events.log) events.log.warn({ event: 'compute.printed', text }, 'the compute host printed');
    else process.stderr.write(text);
  }

  function start(): void {
    if (isClosed) return;
    child = fork(hostFile, [], {
      execArgv: [`--max-old-space-size=${HOST_HEAP_MB}`, ...loaderFlags()],
      env: hostEnvironment(),
      serialization: 'advanced',
      stdio: ['ignore', 'inherit', 'pipe', 'ipc'],
    });
    child.on('message', receive);
    child.once('exit', ended);
    child.stderr?.on('data', (chunk: Buffer) => passOn(chunk.toString()));
    child.on('error', (error) => events.log?.warn({ event: 'compute.host-error', err: error }, 'the compute host'));
    send({ type: 'start', options });
  }

  function send(command: HostCommand): void {
    // A message to a process that has just ended is answered by its exit.
    if (child?.connected) child.send(command, () => undefined);
  }

  async function close(): Promise<void> {
    isClosed = true;
    events.onEnd({ code: 'closed', message: 'The service stopped before this work was done.', comesBack: false });
    for (const { reject } of readyWaiters.splice(0)) reject(new Error('the compute host was closed'));
    const closing = child;
    if (!closing || closing.exitCode !== null) return;
    const exited = new Promise<void>((resolve) => closing.once('exit', () => resolve()));
    const timer = setTimeout(() => closing.kill('SIGKILL'), CLOSE_LIMIT_MS);
    if (closing.connected) closing.disconnect();
    await exited;
    clearTimeout(timer);
  }

  start();
  return {
    send,
    ready: () => (isReady ? Promise.resolve() : new Promise((resolve, reject) => readyWaiters.push({ resolve, reject }))),
    isReady: () => isReady,
    isClosed: () => isClosed,
    kill: () => void child?.kill('SIGKILL'),
    close,
  };
}
