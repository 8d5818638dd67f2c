import { afterAll, beforeAll, expect, test } from 'vitest';
import type { JobKind } from '#contract/jobs.ts';
import { transact } from '#server/db/transact.ts';
import { removeTemplate } from '#tests/support/temp-instance.ts';
import { jobHarness, type JobHarness } from './job-harness.ts';

let harness: JobHarness;
beforeAll(async () => {
  harness = await jobHarness();
  await harness.compute.ready();
  await harness.runToEnd('load-file');
});
afterAll(async () => {
  await harness.close();
  await removeTemplate();
});

/** Longest time this thread stood still while a job ran and this thread wrote a row every 20 ms. */
async function stillnessDuring(kind: JobKind, params: object): Promise<{ longestMs: number; jobMs: number; writes: number }> {
  let isRunning = true;
  const startedAt = performance.now();
  const job = await harness.enqueue(kind, params);
  const ended = harness.jobs.waitFor(job.id).finally(() => (isRunning = false));
  let [writes, longestMs, lastAt] = [0, 0, performance.now()];
  while (isRunning) {
    await transact(harness.db, (trx) => trx('job_effects').insert({ job_id: job.id }));
    await new Promise((resolve) => setTimeout(resolve, 20));
    writes += 1;
    longestMs = Math.max(longestMs, performance.now() - lastAt);
    lastAt = performance.now();
  }
  expect((await ended).state).toBe('done');
  return { longestMs, jobMs: performance.now() - startedAt, writes };
}

// Were the work done on this thread, it would stand still for as long as the job takes. How short the
// delays are on a quiet machine is measured by tests/bench/import-delay.ts.
test('JO-05 this thread goes on while a job writes 48 columns of 200,000 rows', { timeout: 300_000 }, async () => {
  const { longestMs, jobMs, writes } = await stillnessDuring('components', { nRows: 200_000, nColumns: 48 });
  expect(writes).toBeGreaterThan(5);
  expect(longestMs).toBeLessThan(jobMs / 2);
});
