/** A server in small, to be killed by the test: takes up what was left, then asks for jobs without end. */
import { openDb } from '#server/db/knex.ts';
import { createLog } from '#server/lib/log.ts';
import { createEvents } from '#server/modules/jobs/events.ts';
import { createJobsService } from '#server/modules/jobs/jobs.service.ts';
import { testCompute } from '#tests/workers/test-compute.ts';
import { registerTestKinds } from './job-harness.ts';

const [databaseFile = '', folder = '', actorId = '', nJobs = ''] = process.argv.slice(2);
const db = openDb(databaseFile);
const compute = testCompute(folder, databaseFile);
const events = createEvents();
const jobs = createJobsService({ db, compute, events, log: createLog('silent') });
registerTestKinds(jobs);
for (const depositId of [1, 2]) {
  events.subscribe(depositId, ({ event }) => {
    if (event.type === 'job' && event.job.progress > 0) process.stdout.write('working\n');
  });
}
await jobs.start();
process.stdout.write('started\n');

const actor = { id: Number(actorId), name: 'of no matter' };
for (let n = 0; n < Number(nJobs); n++) {
  const depositId = 1 + (n % 2);
  const params = { nRows: 140_000, nColumns: 12 };
  const job = await jobs.enqueue({ depositId, kind: 'components', title: 'Write columns', params, actor });
  process.stdout.write(`job ${job.id}\n`);
}
// Until everything it knows of has ended; then it says so and waits to be killed.
const ids: number[] = await db('jobs').pluck('id');
await Promise.all(ids.map((id) => jobs.waitFor(id)));
process.stdout.write('idle\n');
