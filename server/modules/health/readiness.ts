import { statfs } from 'node:fs/promises';
import type { Knex } from 'knex';

const GIB = 1024 ** 3;
const MIN_FREE_SHARE = 0.05;

/** One thing the service needs; answers what is wrong in words, or null. */
export type Check = () => Promise<string | null>;

/** The database takes a write lock; nothing is written. */
export const databaseCheck =
  (db: Knex): Check =>
  async () => {
    try {
      await db.raw('UPDATE instance_facts SET value = value WHERE 0');
      return null;
    } catch {
      return 'the database does not take writes';
    }
  };

export interface DiskSpace {
  freeBytes: number;
  totalBytes: number;
}

/** Little room: under 5 % or under 1 GiB free. */
export const isShortOfSpace = ({ freeBytes, totalBytes }: DiskSpace): boolean =>
  freeBytes < GIB || freeBytes < totalBytes * MIN_FREE_SHARE;

export async function diskSpace(folder: string): Promise<DiskSpace> {
  const { bavail, blocks, bsize } = await statfs(folder);
  return { freeBytes: bavail * bsize, totalBytes: blocks * bsize };
}

export const diskCheck =
  (folder: string): Check =>
  async () => {
    try {
      return isShortOfSpace(await diskSpace(folder))
        ? 'the disk has less than 1 GiB or 5 % free'
        : null;
    } catch {
      return 'the data folder cannot be read';
    }
  };
