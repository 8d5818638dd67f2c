import type { Person } from '#server/lib/actor.ts';
import type { JobsService } from '#server/modules/jobs/jobs.service.ts';

/** Asks for the tables to be put together, unless that waits in the queue already: one run sees all loads before it. */
export async function enqueueAssembly(jobs: JobsService, depositId: number, actor: Person): Promise<void> {
  const waits = (await jobs.list(depositId)).some(({ kind, state }) => kind === 'assemble' && state === 'queued');
  if (!waits) await jobs.enqueue({ depositId, kind: 'assemble', title: 'Put the tables together', params: {}, actor });
}
