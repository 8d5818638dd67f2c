import { defineTask } from '#workers/task.ts';

export default defineTask<null, never>(() => {
  throw new TypeError('something of ours is broken');
});
