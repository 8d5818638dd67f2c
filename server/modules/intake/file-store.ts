import { createHash } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { mkdir, open, rename, rm } from 'node:fs/promises';
import { join } from 'node:path';

/** Stored uploads: names are random ids, contents never change. */
export interface FileStore {
  pathOf(storedName: string): string;
  /** Moves a received file in; on disk for good when this answers. */
  keep(receivedPath: string, storedName: string): Promise<{ sha256: string }>;
  remove(storedName: string): Promise<void>;
}

async function syncPath(path: string): Promise<void> {
  const handle = await open(path, 'r');
  try {
    await handle.sync();
  } finally {
    await handle.close();
  }
}

async function sha256Of(path: string): Promise<string> {
  const hash = createHash('sha256');
  for await (const chunk of createReadStream(path, { highWaterMark: 1 << 18 })) {
    if (chunk instanceof Uint8Array) hash.update(chunk);
  }
  return hash.digest('hex');
}

export function createFileStore(uploadsDir: string): FileStore {
  const pathOf = (storedName: string): string => join(uploadsDir, storedName);
  return {
    pathOf,
    async keep(receivedPath, storedName) {
      await mkdir(uploadsDir, { recursive: true });
      const sha256 = await sha256Of(receivedPath);
      await syncPath(receivedPath);
      await rename(receivedPath, pathOf(storedName));
      await syncPath(uploadsDir);
      return { sha256 };
    },
    remove: (storedName) => rm(pathOf(storedName), { force: true }),
  };
}
