import { createHash } from 'node:crypto';
import { createReadStream, existsSync } from 'node:fs';
import { copyFile, mkdir, readdir, stat, writeFile } from 'node:fs/promises';
import { basename, dirname, join, relative } from 'node:path';
import { pipeline } from 'node:stream/promises';
import type { DataPaths } from '../lib/paths.ts';
import { copyDatabase } from './backup.ts';
import { openDb } from './knex.ts';
import { WORKER_BUSY_TIMEOUT_MS } from './pragmas.ts';

interface BackedUpFile {
  name: string;
  bytes: number;
  sha256: string;
}

/** What a backup holds; written beside it as `manifest.json`. */
export interface Manifest {
  madeAt: string;
  database: BackedUpFile;
  /** Stored uploads and code files, by their path in the data folder. */
  files: BackedUpFile[];
  /** Last hash of each chain of the audit record (0: the instance), to hold the record to later. */
  auditHeads: { chain: number; entries: number; hash: string }[];
}

async function sha256Of(path: string): Promise<string> {
  const hash = createHash('sha256');
  await pipeline(createReadStream(path), hash);
  return hash.digest('hex');
}

const describeFile = async (root: string, path: string): Promise<BackedUpFile> => ({
  name: relative(root, path),
  bytes: (await stat(path)).size,
  sha256: await sha256Of(path),
});

async function filesUnder(folder: string): Promise<string[]> {
  if (!existsSync(folder)) return [];
  const entries = await readdir(folder, { recursive: true, withFileTypes: true });
  return entries
    .filter((entry) => entry.isFile())
    .map((entry) => join(entry.parentPath, entry.name))
    .sort();
}

/** Copies a folder file by file into the backup; each copy is read back and must have the same checksum. */
async function copyStored(from: string, backup: string): Promise<BackedUpFile[]> {
  const copied: BackedUpFile[] = [];
  const to = join(backup, basename(from));
  await mkdir(to, { recursive: true });
  for (const source of await filesUnder(from)) {
    const target = join(to, relative(from, source));
    await mkdir(dirname(target), { recursive: true });
    await copyFile(source, target);
    const file = await describeFile(backup, target);
    if (file.sha256 !== (await sha256Of(source)))
      throw new Error(`${target}: the copy differs from ${source}`);
    copied.push(file);
  }
  return copied;
}

/** Every file the copied database speaks of must be among the copied files. */
async function checkAgainstDatabase(
  database: string,
  files: readonly BackedUpFile[],
): Promise<Manifest['auditHeads']> {
  const copy = openDb(database, WORKER_BUSY_TIMEOUT_MS);
  try {
    const there = new Set(files.map((file) => file.sha256));
    const known = await copy<{ file_name: string; sha256: string; state: string }>(
      'uploads',
    ).whereNot({ state: 'discarded' });
    const missing = known.filter((upload) => !there.has(upload.sha256));
    if (missing.length > 0)
      throw new Error(
        `${missing.length} stored files are missing, the first is ${missing[0]?.file_name ?? ''}`,
      );
    return await copy<Manifest['auditHeads'][number]>('audit_heads')
      .orderBy('chain')
      .select('chain', 'entries', 'hash');
  } finally {
    await copy.raw('PRAGMA journal_mode = DELETE'); // one file, with nothing beside it
    await copy.destroy();
  }
}

/**
 * Copies database and stored files into a new folder while the server works, and verifies the copy.
 *
 * @param folder Must not exist yet.
 * @throws {Error} when the copy is not whole; what was copied so far is left for a look.
 */
export async function backupAll(paths: DataPaths, folder: string, now: Date): Promise<Manifest> {
  await mkdir(dirname(folder), { recursive: true });
  await mkdir(folder, { mode: 0o700 });
  const database = join(folder, 'selvage.sqlite');
  const db = openDb(paths.database, WORKER_BUSY_TIMEOUT_MS);
  try {
    await copyDatabase(db, database);
  } finally {
    await db.destroy();
  }
  // After the database: files are never changed, so every file it speaks of is there.
  const files = [
    ...(await copyStored(paths.uploads, folder)),
    ...(await copyStored(paths.codes, folder)),
  ];
  const auditHeads = await checkAgainstDatabase(database, files);
  const manifest = {
    madeAt: now.toISOString(),
    database: await describeFile(folder, database),
    files,
    auditHeads,
  };
  await writeFile(join(folder, 'manifest.json'), `${JSON.stringify(manifest, null, 2)}\n`);
  return manifest;
}
