import type { Upload } from '#contract/files.ts';
import { createStore, type Store } from '#src/lib/store.ts';
import { problemText } from '#src/lib/toasts.ts';

export type QueueState = 'waiting' | 'sending' | 'reading' | 'kept' | 'refused' | 'failed' | 'cancelled';

export interface QueuedFile {
  key: number;
  depositId: number;
  file: File;
  state: QueueState;
  sentBytes: number;
  /** When sending began, ms; for speed and time left. */
  startedAt: number;
  /** Why it was refused or failed. */
  message: string | null;
  uploadId: number | null;
}

interface Received {
  uploads: Pick<Upload, 'id'>[];
  refused: { fileName: string; message: string }[];
}

export type SendFile = (
  depositId: number,
  file: File,
  options: { signal: AbortSignal; onProgress: (sentBytes: number, totalBytes: number) => void },
) => Promise<Received>;

export interface UploadQueue extends Pick<Store<readonly QueuedFile[]>, 'get' | 'subscribe'> {
  add: (depositId: number, files: readonly File[], onKept: () => void) => void;
  cancel: (key: number) => void;
  retry: (key: number, onKept: () => void) => void;
  /** Takes ended lines of a deposit away. */
  clear: (depositId: number) => void;
}

export const isUnderWay = ({ state }: QueuedFile): boolean => state === 'waiting' || state === 'sending' || state === 'reading';

/** Sends files one after the other, so that a refusal, a cancel or a lost line touches one file only. */
export function createUploadQueue(send: SendFile, now: () => number = () => performance.now()): UploadQueue {
  const store = createStore<readonly QueuedFile[]>([]);
  const aborts = new Map<number, AbortController>();
  const onKeptOf = new Map<number, () => void>();
  let lastKey = 0;
  let isBusy = false;

  const change = (key: number, next: Partial<QueuedFile>): void =>
    store.set(store.get().map((item) => (item.key === key ? { ...item, ...next } : item)));

  async function sendOne({ key, depositId, file }: QueuedFile): Promise<void> {
    const abort = new AbortController();
    aborts.set(key, abort);
    change(key, { state: 'sending', startedAt: now() });
    const onProgress = (sentBytes: number, totalBytes: number): void =>
      change(key, { sentBytes: Math.min(sentBytes, file.size), state: sentBytes >= totalBytes ? 'reading' : 'sending' });
    try {
      const { uploads, refused } = await send(depositId, file, { signal: abort.signal, onProgress });
      const [kept] = uploads;
      if (kept) change(key, { state: 'kept', uploadId: kept.id });
      else change(key, { state: 'refused', message: refused[0]?.message ?? 'not kept, and no reason given' });
      if (kept) onKeptOf.get(key)?.();
    } catch (error) {
      if (abort.signal.aborted) change(key, { state: 'cancelled' });
      else change(key, { state: 'failed', message: problemText(error) });
    } finally {
      aborts.delete(key);
    }
  }

  async function pump(): Promise<void> {
    if (isBusy) return;
    isBusy = true;
    for (let next = store.get().find(({ state }) => state === 'waiting'); next; next = store.get().find(({ state }) => state === 'waiting')) {
      await sendOne(next);
    }
    isBusy = false;
  }

  return {
    get: store.get,
    subscribe: store.subscribe,
    add(depositId, files, onKept) {
      const queued = files.map((file): QueuedFile => {
        lastKey += 1;
        onKeptOf.set(lastKey, onKept);
        return { key: lastKey, depositId, file, state: 'waiting', sentBytes: 0, startedAt: 0, message: null, uploadId: null };
      });
      store.set([...store.get(), ...queued]);
      void pump();
    },
    cancel(key) {
      const abort = aborts.get(key);
      if (abort) abort.abort();
      else change(key, { state: 'cancelled' });
    },
    retry(key, onKept) {
      onKeptOf.set(key, onKept);
      change(key, { state: 'waiting', sentBytes: 0, message: null });
      void pump();
    },
    clear(depositId) {
      store.set(store.get().filter((item) => item.depositId !== depositId || isUnderWay(item)));
    },
  };
}
