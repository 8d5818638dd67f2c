import { existsSync } from 'node:fs';
import { mkdir, rm, writeFile } from 'node:fs/promises';
import type { DataPaths } from './paths.ts';

export interface DataDir {
  /** The last run ended without saying so: a crash, a kill, a power cut. */
  wasUncleanStop: boolean;
  /** Notes that this run ended well. */
  markClean(): Promise<void>;
}

/** Makes the data folder, throws away files that were still arriving, and marks it as in use. */
export async function prepareDataDir(paths: DataPaths): Promise<DataDir> {
  const wasUncleanStop = existsSync(paths.running);
  await rm(paths.incoming, { recursive: true, force: true });
  for (const folder of [paths.root, paths.uploads, paths.incoming, paths.backups])
    await mkdir(folder, { recursive: true, mode: 0o700 });
  await writeFile(paths.running, `${process.pid}\n`);
  return { wasUncleanStop, markClean: () => rm(paths.running, { force: true }) };
}
