import { defineTask } from '#workers/task.ts';

/** Many small objects: the thread's own heap limit stops it. */
export default defineTask<null, never>(() => {
  const kept: { row: number }[] = [];
  for (let row = 0; ; row++) kept.push({ row });
});
