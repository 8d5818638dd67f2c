import type { RunOptions } from '#workers/client.ts';

/** Work that can be done side by side: how its input is divided and its outputs are put together. */
export interface Parts<In, Out> {
  /** At most `count` inputs, in the order their outputs are joined. */
  split(this: void, input: In, count: number): In[];
  join(this: void, outputs: [Out, ...Out[]]): Out;
}

/** Divides a list into at most `count` runs of about one length, in order. */
export function chunksOf<Item>(items: readonly Item[], count: number): Item[][] {
  const chunks = Math.max(1, Math.min(count, items.length));
  return Array.from({ length: chunks }, (_, i) => items.slice(Math.floor((i * items.length) / chunks), Math.floor(((i + 1) * items.length) / chunks)));
}

/**
 * Runs the parts of a piece of work side by side. The share done is the mean of the parts; when one
 * fails the others are stopped before its failure is passed on.
 */
export async function runParts<In, Out>(inputs: readonly In[], run: (input: In, options: RunOptions) => Promise<Out>, { signal, onProgress }: RunOptions): Promise<Out[]> {
  const stop = new AbortController();
  const shares = inputs.map(() => 0);
  const started = inputs.map(async (input, part) => {
    try {
      return await run(input, {
        signal: signal ? AbortSignal.any([signal, stop.signal]) : stop.signal,
        onProgress: (phase, share) => {
          shares[part] = share;
          onProgress?.(phase, shares.reduce((sum, own) => sum + own, 0) / shares.length);
        },
      });
    } catch (error) {
      // Only the first failure is the cause; those it stops are not.
      if (!stop.signal.aborted) stop.abort(error);
      throw error;
    }
  });
  const ends = await Promise.allSettled(started);
  if (stop.signal.aborted) throw stop.signal.reason;
  return ends.flatMap((end) => (end.status === 'fulfilled' ? [end.value] : []));
}
