import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { monitorEventLoopDelay } from 'node:perf_hooks';
import { openDb } from '#server/db/knex.ts';
import { start } from '#server/start.ts';
import { httpClient } from '#tests/server/journeys/http-client.ts';
import { insertPeople } from '#tests/support/people.ts';
import { removeTemplate, tempInstance } from '#tests/support/temp-instance.ts';
import { ASSAY_COLUMNS, ASSAY_ROWS, writeAssays } from './assay-file.ts';
import type { Bench } from './bench.ts';

const COLLARS = 500;
const IDLE_MS = 3_000;

/** How long this thread's event loop is held up while `work` goes on. */
async function delayDuring(work: () => Promise<unknown>): Promise<number> {
  const histogram = monitorEventLoopDelay({ resolution: 5 });
  histogram.enable();
  await work();
  histogram.disable();
  return histogram.percentile(99) / 1e6;
}

/** Upload and load of 100,000 × 51 by HTTP; the server runs on this thread, its compute host beside it. Goal: p99 of the event-loop delay at most 50 ms. */
export async function importDelayBench(): Promise<Bench> {
  const folder = mkdtempSync(join(tmpdir(), 'selvage-bench-'));
  const path = join(folder, 'assays.csv');
  writeAssays(path);
  const content = readFileSync(path);
  const { env, remove } = await tempInstance({ PORT: '0', LOG_LEVEL: 'error', INSTANCE: 'production', SMTP_URL: 'smtp://127.0.0.1:9', ALLOW_PLAIN_HTTP: 'yes' });
  const db = openDb(env.paths.database);
  const people = await insertPeople(db, env, () => new Date());
  await db.destroy();
  const server = await start(env);
  const api = httpClient(`http://127.0.0.1:${server.port}`, people.depositId, { Cookie: `selvage=${people.of('lead').cookie}`, 'Sec-Fetch-Site': 'same-origin' });
  const collars = ['hole,east,north,elevation,length', ...Array.from({ length: COLLARS }, (_, i) => `H${String(i).padStart(4, '0')},${1000 + i},2000,300,200`)].join('\n');
  const collarFile = await api.upload({ name: 'collar.csv', content: collars });
  await api.done(await api.load(collarFile.id));
  const delays = { ours: [] as number[], peer: [] as number[] };
  const worst = (found: readonly number[]): string => Math.max(...found.slice(1)).toFixed(1);
  return {
    workload: `import delay: upload and load ${ASSAY_ROWS} × ${ASSAY_COLUMNS} by HTTP`,
    peerName: `${IDLE_MS} ms idle`,
    ours: async () => {
      delays.ours.push(
        await delayDuring(async () => {
          const { id } = await api.upload({ name: 'assays.csv', content });
          await api.done(await api.load(id));
        }),
      );
    },
    peer: async () => {
      delays.peer.push(await delayDuring(() => new Promise((resolve) => setTimeout(resolve, IDLE_MS))));
    },
    figures: () => `event-loop delay p99, worst run: ${worst(delays.ours)} ms (idle ${worst(delays.peer)} ms, goal 50 ms)`,
    close: async () => {
      await server.close();
      remove();
      await removeTemplate();
      rmSync(folder, { recursive: true, force: true });
    },
  };
}
