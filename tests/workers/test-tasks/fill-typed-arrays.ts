import { defineTask } from '#workers/task.ts';

/** 4 GiB outside any heap. */
export default defineTask<null, { blocks: number }>(() => {
  const blocks: Float64Array[] = [];
  while (blocks.length < 256) blocks.push(new Float64Array(2 ** 21).fill(blocks.length));
  return { blocks: blocks.length };
});
