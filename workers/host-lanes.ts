import { Piscina } from 'piscina';
import {
  isThreadMessage, type HostOptions, type Lane, type TaskCall, type TaskOutcome, type ThreadMessage,
} from './task-types.ts';

type Pool = Piscina<TaskCall<unknown>, TaskOutcome<unknown>>;

export interface LanePools {
  /** The lane's pool, made at the first use. */
  pool(lane: Lane): Pool;
  /** Ends the thread, if this lane still has it; answers whether it did. */
  endThread(lane: Lane, threadId: number): boolean;
  /** Replaces the lane's idle threads by new ones, made when next needed: their memory goes back. */
  renew(lane: Lane): void;
}

export function createLanePools(options: HostOptions, onMessage: (message: ThreadMessage) => void): LanePools {
  const pools = new Map<Lane, Pool>();

  function makePool(lane: Lane): Pool {
    const threads = lane === 'jobs' ? options.threads : 1;
    const pool: Pool = new Piscina({
      // As many at least as at most: a pool below its least number replaces a thread that ended at
      // once, while one above it would leave queued work waiting for the next call.
      minThreads: threads,
      maxThreads: threads,
      execArgv: options.threadFlags,
      resourceLimits: { maxOldGenerationSizeMb: options.threadHeapMb },
    });
    pool.on('message', (message: unknown) => {
      if (isThreadMessage(message)) onMessage(message);
    });
    // A fault outside any task: the thread is replaced, and the task it would have had runs there.
    pool.on('error', (error: unknown) => console.error('compute thread failed outside a task', error));
    return pool;
  }

  return {
    pool(lane) {
      const pool = pools.get(lane) ?? makePool(lane);
      pools.set(lane, pool);
      return pool;
    },
    endThread(lane, threadId) {
      const thread = pools.get(lane)?.threads.find((worker) => worker.threadId === threadId);
      void thread?.terminate();
      return thread !== undefined;
    },
    renew(lane) {
      const pool = pools.get(lane);
      pools.delete(lane);
      void pool?.destroy();
    },
  };
}
