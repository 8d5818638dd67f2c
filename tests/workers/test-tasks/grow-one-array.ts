import { defineTask } from '#workers/task.ts';

/** One array that doubles: the engine gives up on the whole process. */
export default defineTask<null, { length: number }>(() => {
  const kept: number[] = [];
  while (kept.length < 1e9) kept.push(kept.length + 0.5);
  return { length: kept.length };
});
