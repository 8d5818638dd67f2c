import { join, resolve } from 'node:path';
import { backupAll } from '../db/backup-all.ts';
import { readEnv } from '../lib/env.ts';

/** `npm run backup [folder]`: copies database and stored files while the server works, and verifies the copy. */
const { paths } = readEnv(process.env);
const now = new Date();
const given = process.argv[2];
const folder =
  given === undefined
    ? join(paths.backups, now.toISOString().replaceAll(/[:.]/g, '-'))
    : resolve(given);
try {
  const { database, files, auditHeads } = await backupAll(paths, folder, now);
  const lines = [
    `Backup in ${folder}, verified.`,
    `  database  ${database.bytes} bytes  SHA-256 ${database.sha256}`,
    `  stored files  ${files.length}`,
    ...auditHeads.map(
      ({ chain, entries, hash }) =>
        `  audit record ${chain === 0 ? 'of the instance' : `of deposit ${chain}`}: ${entries} entries, head ${hash}`,
    ),
    'To restore: stop the server and put selvage.sqlite, uploads and codes into an empty data folder.',
  ];
  process.stdout.write(`${lines.join('\n')}\n`);
} catch (error) {
  process.stderr.write(
    `The backup failed: ${error instanceof Error ? error.message : String(error)}\n`,
  );
  process.exitCode = 1;
}
