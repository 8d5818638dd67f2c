import { join, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';

/** What the data folder holds. The database, `uploads` and `codes` are the whole state. */
export interface DataPaths {
  root: string;
  database: string;
  /** Accepted files, kept as they came. */
  uploads: string;
  /** Files of codes as they were made, kept for their checksums. */
  codes: string;
  /** Files still arriving; emptied at start. */
  incoming: string;
  backups: string;
  sessionSecret: string;
  /** Present while a server runs: found at start, it tells of a stop that was not clean. */
  running: string;
}

export function dataPaths(dataDir: string): DataPaths {
  const root = resolve(dataDir);
  return {
    root,
    database: join(root, 'selvage.sqlite'),
    uploads: join(root, 'uploads'),
    codes: join(root, 'codes'),
    incoming: join(root, 'incoming'),
    backups: join(root, 'backups'),
    sessionSecret: join(root, 'session-secret'),
    running: join(root, 'running'),
  };
}

const isCompiled = !import.meta.url.endsWith('.ts');
const fromHere = (relative: string): string => fileURLToPath(new URL(relative, import.meta.url));

/** Beside the server's folder both in the sources and in the build. */
export const MIGRATIONS_DIR = fromHere('../../migrations');
/** `dist/client`: the build puts the compiled server in `dist/node`. */
export const CLIENT_DIR = fromHere(isCompiled ? '../../../client' : '../../dist/client');
