import type { Log } from './log.ts';

/** Work an answer does not wait for, such as an e-mail; a clean stop waits for it. */
export interface Background {
  run(what: string, work: () => Promise<void>): void;
  idle(): Promise<void>;
}

export function createBackground(log: Log): Background {
  const running = new Set<Promise<void>>();
  return {
    run(what, work) {
      const done = work()
        .catch((error: unknown) =>
          log.error({ event: 'background.failed', what, err: error }, 'background work failed'),
        )
        .finally(() => running.delete(done));
      running.add(done);
    },
    async idle() {
      await Promise.all(running);
    },
  };
}
