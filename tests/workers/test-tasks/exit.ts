import { defineTask } from '#workers/task.ts';

export default defineTask<null, never>(() => process.exit(3));
