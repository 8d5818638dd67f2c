import { defineTask } from '#workers/task.ts';

export default defineTask<unknown, unknown>((input) => input);
