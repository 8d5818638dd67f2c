import { once } from 'node:events';
import { createServer, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { Writable } from 'node:stream';
import type { Knex } from 'knex';
import request from 'supertest';
import { afterAll } from 'vitest';
import type { TokenRight } from '#contract/roles.ts';
import { type App, createApp } from '#server/app.ts';
import { openDb } from '#server/db/knex.ts';
import { createBackground } from '#server/lib/background.ts';
import type { Env } from '#server/lib/env.ts';
import { createLog } from '#server/lib/log.ts';
import { createMailer, type Mailer } from '#server/modules/mail/mailer.ts';
import type { AppDeps } from '#server/services.ts';
import { type Compute, createCompute } from '#workers/client.ts';
import { cheapHasher, insertPeople, type TestPeople, type Who } from './people.ts';
import { removeTemplate, tempInstance } from './temp-instance.ts';

export interface TestClientOptions {
  /** Variables of the environment, beside those every test has. */
  env?: Record<string, string>;
  /** Start the real compute host; without it, work for the workers is refused. */
  compute?: boolean;
  /** Parts of the app to be other than usual. */
  deps?: Partial<AppDeps>;
}

export interface TestClient extends TestPeople {
  app: App;
  db: Knex;
  env: Env;
  mailer: Mailer;
  compute: Compute;
  /** `http://127.0.0.1:<port>`. */
  url: string;
  /** Every line the server logged. */
  logLines: string[];
  clock: TestClock;
  /** Requests as one of the test people, from the instance's own pages. */
  as(who: Who): ReturnType<typeof request.agent>;
  /** Requests with no headers of a browser. */
  bare(): ReturnType<typeof request.agent>;
  /** Text of a new API token on deposit A (or another), owned by the person. */
  token(right: TokenRight, owner?: Exclude<Who, null>, depositId?: number): Promise<string>;
  close(): Promise<void>;
}

/** Runs with the system's clock until it is moved. */
export interface TestClock {
  now: () => Date;
  advance(ms: number): void;
}

function testClock(): TestClock {
  let aheadMs = 0;
  return {
    now: () => new Date(Date.now() + aheadMs),
    advance(ms) {
      aheadMs += ms;
    },
  };
}

const noCompute: Compute = {
  threads: 1,
  run: () => Promise.reject(new Error('this test has no compute host: ask for testClient({ compute: true })')),
  ready: () => Promise.resolve(),
  isHealthy: () => true,
  close: () => Promise.resolve(),
};

function memoryLog(lines: string[]): Writable {
  return new Writable({
    write(chunk: Buffer, _encoding, done) {
      lines.push(...chunk.toString().split('\n').filter((line) => line.length > 0));
      done();
    },
  });
}

async function listen(app: App): Promise<{ server: Server; url: string }> {
  const server = createServer(app.express).listen(0, '127.0.0.1');
  await once(server, 'listening');
  const { port } = server.address() as AddressInfo;
  return { server, url: `http://127.0.0.1:${port}` };
}

const openClients = new Set<TestClient>();

/** The real app on a fresh copy of a migrated database, with one signed-in person of each kind. */
export async function testClient(options: TestClientOptions = {}): Promise<TestClient> {
  const { env, remove } = await tempInstance(options.env);
  const db = openDb(env.paths.database);
  const logLines: string[] = [];
  const log = createLog(env.logLevel, memoryLog(logLines));
  const clock = testClock();
  const people = await insertPeople(db, env, clock.now);
  const mailer = await createMailer({ smtpUrl: env.smtpUrl, from: env.mailFrom, log });
  const background = createBackground(log);
  const compute = options.compute
    ? createCompute({ databaseFile: env.paths.database, dataDir: env.paths.root, threads: 1, log })
    : noCompute;
  const app = createApp({
    env, db, log, clock: clock.now, mailer, background, compute, hasher: cheapHasher, demo: null, checks: [], ...options.deps,
  });
  const { server, url } = await listen(app);
  const cookieName = env.isHttps ? '__Host-selvage' : 'selvage';

  const client: TestClient = {
    ...people, app, db, env, mailer, compute, url, logLines, clock,
    as(who) {
      const agent = request.agent(url).set('Sec-Fetch-Site', 'same-origin');
      return who === null ? agent : agent.set('Cookie', `${cookieName}=${people.of(who).cookie}`);
    },
    bare: () => request.agent(url),
    async token(right, owner = 'lead', depositId = people.depositId) {
      const { id, name, email } = people.of(owner);
      const actor = { id, name, email, isAdministrator: false, via: { kind: 'session', sessionId: 'of a test' } } as const;
      const made = await app.services.tokens.create({ depositId, role: 'lead' }, { name: `${right} token`, right, days: 30 }, actor);
      return made.text;
    },
    async close() {
      openClients.delete(client);
      app.streams.endAll();
      server.closeAllConnections();
      server.close();
      await background.idle();
      await app.services.analysis.jobs.close();
      await compute.close();
      await mailer.close();
      app.services.analysis.store.close();
      await db.destroy();
      remove();
    },
  };
  openClients.add(client);
  return client;
}

// Once per test file: whatever a test leaves open is closed with it.
afterAll(async () => {
  await Promise.all([...openClients].map((client) => client.close()));
  await removeTemplate();
});
