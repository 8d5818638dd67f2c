import { once } from 'node:events';
import { createServer, type Server } from 'node:http';
import type { Knex } from 'knex';
import { createCompute } from '#workers/client.ts';
import { createApp } from './app.ts';
import { openChecked } from './db/open-checked.ts';
import { createBackground } from './lib/background.ts';
import { SECOND_MS, systemClock } from './lib/clock.ts';
import { prepareDataDir } from './lib/data-dir.ts';
import type { Env } from './lib/env.ts';
import { createLog, type Log } from './lib/log.ts';
import type { Demo } from './modules/admin/demo.ts';
import { createDemo } from './modules/demo/demo.ts';
import { computeHasher } from './modules/auth/password-hasher.ts';
import { databaseCheck, diskCheck, diskSpace, isShortOfSpace } from './modules/health/readiness.ts';
import { createMailer } from './modules/mail/mailer.ts';

const COMPUTE_THREADS = 2;
const FINISH_LIMIT_MS = 10 * SECOND_MS;

export interface Running {
  log: Log;
  port: number;
  demo: Demo | null;
  /** Something failed beyond repair: not ready from now on. */
  markBroken(): void;
  /** Stops cleanly: no new work, streams ended, requests finished within 10 s, database checkpointed. */
  close(): Promise<void>;
}

/** Opens everything in order: data folder, database, compute host, mail, app, port. */
export async function start(env: Env, print: (line: string) => void = () => undefined): Promise<Running> {
  const log = createLog(env.logLevel);
  const dataDir = await prepareDataDir(env.paths);
  await warnAtStart(env, dataDir.wasUncleanStop, log);
  const db = await openChecked(env.paths, env.instance, log);
  const compute = createCompute({ databaseFile: env.paths.database, dataDir: env.paths.root, threads: COMPUTE_THREADS, log });
  const mailer = await createMailer({ smtpUrl: env.smtpUrl, from: env.mailFrom, log });
  const background = createBackground(log);

  let isBroken = false;
  const checks = [
    databaseCheck(db),
    diskCheck(env.paths.root),
    () => Promise.resolve(compute.isHealthy() ? null : 'the compute host does not answer'),
    () => Promise.resolve(isBroken ? 'an unexpected failure: the service is about to restart' : null),
  ];
  const deps = { env, db, log, clock: systemClock, mailer, background, compute, hasher: computeHasher(compute), checks };
  await compute.ready();
  const demo = env.instance === 'demo' ? createDemo(deps, print) : null;
  const app = createApp({ ...deps, demo });
  app.describe();
  await app.services.analysis.jobs.start();
  await demo?.seed(app.services);
  const server = createServer(app.express);
  const port = await listen(server, env.port);
  log.info({ event: 'started', port, instance: env.instance }, 'started');

  return {
    log,
    port,
    demo,
    markBroken: () => void (isBroken = true),
    async close() {
      const closed = closeServer(server);
      app.streams.endAll();
      await closed;
      await background.idle();
      await app.services.analysis.jobs.close();
      await compute.close();
      await mailer.close();
      app.services.analysis.store.close();
      await closeDatabase(db);
      await dataDir.markClean();
      log.info({ event: 'stopped' }, 'stopped');
    },
  };
}

async function warnAtStart(env: Env, wasUncleanStop: boolean, log: Log): Promise<void> {
  if (wasUncleanStop) log.warn({ event: 'unclean-stop' }, 'the last run did not stop cleanly; unfinished jobs run again');
  if (!env.isHttps) {
    log.warn({ event: 'plain-http', publicUrl: env.publicUrl }, 'plain HTTP: the session cookie is not marked Secure; use TLS for real work');
  }
  if (isShortOfSpace(await diskSpace(env.paths.root))) log.warn({ event: 'disk-space' }, 'the disk has less than 1 GiB or 5 % free');
}

async function listen(server: Server, port: number): Promise<number> {
  server.listen(port);
  try {
    await once(server, 'listening');
  } catch (error) {
    if (!(error instanceof Error && 'code' in error && error.code === 'EADDRINUSE')) throw error;
    throw new Error(`Port ${port} is in use by another program: stop that, or set PORT to another number.`, { cause: error });
  }
  const address = server.address();
  return typeof address === 'object' && address !== null ? address.port : port;
}

async function closeServer(server: Server): Promise<void> {
  const closed = once(server, 'close');
  server.close();
  server.closeIdleConnections();
  const late = setTimeout(() => server.closeAllConnections(), FINISH_LIMIT_MS);
  await closed;
  clearTimeout(late);
}

async function closeDatabase(db: Knex): Promise<void> {
  await db.raw('PRAGMA wal_checkpoint(TRUNCATE)');
  await db.destroy();
}
