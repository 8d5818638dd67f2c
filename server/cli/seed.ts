import { readEnv } from '#server/lib/env.ts';
import { start } from '#server/start.ts';

/** `npm run seed`: migrates and fills a demonstration's data folder without serving it. */
const env = readEnv(process.env);
if (env.instance !== 'demo') throw new Error('Only a demonstration instance is seeded: INSTANCE is production.');
const running = await start({ ...env, port: 0 }, (line) => process.stdout.write(`${line}\n`));
await running.close();
