import { inspect } from 'node:util';
import type { KernelErrorDetail } from '#kernels/kernel-error.ts';

/**
 * Threads apart, so that nobody waits for the wrong work: `sign-in` hashes passwords, `asked` answers
 * what a person is waiting for, `jobs` does everything long.
 */
export const LANES = ['sign-in', 'asked', 'jobs'] as const;
export type Lane = (typeof LANES)[number];

const SHORT_TASKS: ReadonlyMap<string, Lane> = new Map([
  ['hash-password', 'sign-in'],
  ['verify-password', 'sign-in'],
  ['inspect-file', 'asked'],
  ['preview-file', 'asked'],
  ['drop-tables', 'asked'],
]);
export const laneOf = (taskName: string): Lane => SHORT_TASKS.get(taskName) ?? 'jobs';

/** The work was stopped because somebody asked. */
export class Cancelled extends Error {
  constructor() {
    super('The work was cancelled');
    this.name = 'Cancelled';
  }
}

export type ComputeErrorCode =
  | 'out-of-memory'
  | 'thread-ended'
  | 'host-ended'
  | 'no-such-task'
  | 'disk-full'
  | 'unexpected'
  | 'closed';

/** The work ended without an answer. `cause` is for the log, the message for people. */
export class ComputeError extends Error {
  readonly code: ComputeErrorCode;
  /** False when other work ran in the same process, so that either may be the reason. */
  readonly wasAlone: boolean;

  constructor(code: ComputeErrorCode, message: string, wasAlone: boolean, cause?: string) {
    super(message, { cause });
    this.name = 'ComputeError';
    this.code = code;
    this.wasAlone = wasAlone;
  }
}

/** How a task failed, as plain data: between threads an error loses its class and fields. */
export type TaskFailure =
  | { kind: 'kernel'; code: string; message: string; detail: KernelErrorDetail }
  | { kind: 'cancelled' }
  | { kind: 'compute'; code: ComputeErrorCode; message: string; wasAlone: boolean; cause: string };

/** A fault that no kernel named, with its inside for the log. */
export function faultOf(error: unknown): TaskFailure {
  const cause = error instanceof Error ? (error.stack ?? error.message) : inspect(error);
  const isDiskFull = error instanceof Error && 'code' in error && (error.code === 'SQLITE_FULL' || error.code === 'ENOSPC');
  return isDiskFull
    ? { kind: 'compute', code: 'disk-full', message: 'The disk is full: nothing was kept of this work.', wasAlone: true, cause }
    : { kind: 'compute', code: 'unexpected', message: 'The work met a fault of ours; the service has logged it.', wasAlone: true, cause };
}

export type TaskOutcome<Out> = { ok: true; output: Out } | { ok: false; failure: TaskFailure };

export interface HostPaths {
  databaseFile: string;
  dataDir: string;
}

/** What the host hands to a thread. */
export interface TaskCall<In> extends HostPaths {
  runId: number;
  input: In;
  /** One Int32: 1 asks the task to stop. */
  cancelFlag: SharedArrayBuffer;
}

/** What a thread tells the host while it works. */
export type ThreadMessage =
  | { type: 'started'; runId: number; threadId: number }
  | { type: 'progress'; runId: number; phase: string; share: number };

export interface HostOptions extends HostPaths {
  /** Threads of the lane `jobs`; the others have one each. */
  threads: number;
  /** Folder of the task files, an absolute path. */
  taskFolder: string;
  /** Resident memory of the compute process above which its running work is stopped. */
  memoryLimitMb: number;
  /** Heap of one thread. */
  threadHeapMb: number;
  /** Node flags of a thread: the TypeScript loader when running from sources. */
  threadFlags: string[];
}

export type HostCommand =
  | { type: 'start'; options: HostOptions }
  | { type: 'run'; runId: number; taskName: string; input: unknown }
  | { type: 'cancel'; runId: number };

export type HostMessage =
  | { type: 'ready' }
  | { type: 'progress'; runId: number; phase: string; share: number }
  | { type: 'ended'; runId: number; outcome: TaskOutcome<unknown> };

const hasType = (message: unknown): boolean =>
  typeof message === 'object' && message !== null && 'type' in message;

// Both ends of each channel are this code, started together: the tag is enough to know a message.
export const isHostCommand = (message: unknown): message is HostCommand => hasType(message);
export const isHostMessage = (message: unknown): message is HostMessage => hasType(message);
export const isThreadMessage = (message: unknown): message is ThreadMessage => hasType(message);
