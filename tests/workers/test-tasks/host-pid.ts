import { defineTask } from '#workers/task.ts';

export default defineTask<null, number>(() => process.pid);
