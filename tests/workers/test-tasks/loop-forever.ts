import { defineTask } from '#workers/task.ts';

/** Busy and deaf: it never reports. */
export default defineTask<null, never>(() => {
  for (;;);
});
