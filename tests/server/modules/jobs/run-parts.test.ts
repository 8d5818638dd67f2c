import { describe, expect, it, vi } from 'vitest';
import { chunksOf, runParts } from '#server/modules/jobs/run-parts.ts';
import type { RunOptions } from '#workers/client.ts';

describe('dividing a list', () => {
  it.each([
    [[1, 2, 3, 4, 5], 2, [[1, 2], [3, 4, 5]]],
    [[1, 2], 3, [[1], [2]]],
    [[], 2, [[]]],
  ])('%j into %d', (items, count, chunks) => expect(chunksOf(items, count)).toEqual(chunks));
});

const untilAborted = (signal: AbortSignal | undefined): Promise<never> =>
  new Promise((_, reject) => signal?.addEventListener('abort', () => reject(new Error('stopped'))));

describe('running parts side by side', () => {
  it('keeps the order of the parts, whichever ends first', async () => {
    const release: (() => void)[] = [];
    const running = runParts(['a', 'b'], (part) => new Promise<string>((resolve) => release.push(() => resolve(part.toUpperCase()))), {});
    await vi.waitFor(() => expect(release).toHaveLength(2));
    release[1]?.();
    release[0]?.();
    expect(await running).toEqual(['A', 'B']);
  });

  it('tells the mean of the shares', async () => {
    const told: number[] = [];
    await runParts([0.5, 1], (share, { onProgress }: RunOptions) => Promise.resolve(onProgress?.('work', share)), { onProgress: (_, share) => told.push(share) });
    expect(told).toEqual([0.25, 0.75]);
  });

  it('stops the others and passes on the first failure', async () => {
    let stopped = false;
    const run = async (part: string, { signal }: RunOptions): Promise<string> => {
      if (part === 'bad') throw new Error('no rows');
      return untilAborted(signal).catch((error: unknown) => {
        stopped = true;
        throw error;
      });
    };
    await expect(runParts(['slow', 'bad'], run, {})).rejects.toThrow('no rows');
    expect(stopped).toBe(true);
  });

  it('stops all when asked to', async () => {
    const asked = new AbortController();
    const running = runParts(['a', 'b'], (_, { signal }: RunOptions) => untilAborted(signal), { signal: asked.signal });
    asked.abort();
    await expect(running).rejects.toThrow('stopped');
  });
});
