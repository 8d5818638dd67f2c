import { KernelError } from '#kernels/kernel-error.ts';
import { defineTask } from '#workers/task.ts';

export default defineTask<{ row: number }, never>(({ row }) => {
  throw new KernelError('not-positive', 'expected a part > 0, found -1', { row });
});
