import type { Response } from 'express';
import { SECOND_MS } from './clock.ts';

const RECHECK_MS = 3 * SECOND_MS;

export interface StreamWatch {
  /** Ends the stream once `stillAllowed` rejects; forgets it when it closes. */
  watch(res: Response, stillAllowed: () => Promise<unknown>): void;
  /** Ends every open stream, so that the server can close. */
  endAll(): void;
}

/** Keeps open event streams honest: whoever loses the session or the right loses the stream in seconds. */
export function createStreamWatch(recheckMs = RECHECK_MS): StreamWatch {
  const open = new Set<Response>();
  return {
    watch(res, stillAllowed) {
      open.add(res);
      const timer = setInterval(() => {
        stillAllowed().catch(() => res.end());
      }, recheckMs);
      res.once('close', () => {
        clearInterval(timer);
        open.delete(res);
      });
    },
    endAll() {
      for (const res of open) res.end();
    },
  };
}
