import { defineTask } from '#workers/task.ts';

/** Busy for a time, reporting at every step. */
export default defineTask<{ ms: number }, { steps: number }>(({ ms }, { report }) => {
  const startedAt = performance.now();
  let steps = 0;
  for (let spent = 0; spent < ms; spent = performance.now() - startedAt) {
    report(spent < ms / 2 ? 'count up' : 'count on', spent / ms);
    steps += 1;
  }
  return { steps };
});
