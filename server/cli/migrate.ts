import { mkdir } from 'node:fs/promises';
import { openChecked } from '../db/open-checked.ts';
import { readEnv } from '../lib/env.ts';
import { createLog } from '../lib/log.ts';

/** `npm run migrate`: brings the database to this version's schema; an existing one is copied first. */
const env = readEnv(process.env);
await mkdir(env.paths.root, { recursive: true, mode: 0o700 });
const db = await openChecked(env.paths, env.instance, createLog(env.logLevel));
await db.destroy();
process.stdout.write(`The database ${env.paths.database} is up to date.\n`);
