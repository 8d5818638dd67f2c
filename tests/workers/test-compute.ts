import { fileURLToPath } from 'node:url';
import { createCompute, type Compute } from '#workers/client.ts';

/** A compute host whose tasks are those of `test-tasks`, with small limits. */
export function testCompute(folder: string, databaseFile: string): Compute {
  const taskFolder = fileURLToPath(new URL('./test-tasks/', import.meta.url));
  return createCompute({
    databaseFile, dataDir: folder, threads: 2, taskFolder, memoryLimitMb: 1_500, threadHeapMb: 64,
    log: { warn: () => undefined },
  });
}
