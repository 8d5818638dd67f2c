import type { Response } from 'express';
import type { Job } from '#contract/jobs.ts';
import { SECOND_MS } from '#server/lib/clock.ts';
import type { Events, NumberedEvent } from './events.ts';

const HEARTBEAT_MS = 15 * SECOND_MS;
const RECONNECT_MS = 2 * SECOND_MS;
/** A reader this far behind is let go; it comes back with its last id. */
const MAX_BEHIND_BYTES = 1024 * 1024;

const asText = ({ id, event }: NumberedEvent): string => `id: ${id}\ndata: ${JSON.stringify(event)}\n\n`;

interface StreamSources {
  events: Events;
  /** The deposit's jobs as they are, for whoever cannot resume. */
  currentJobs: () => Promise<Job[]>;
  lastEventId: string | undefined;
}

/**
 * Server-sent events of one deposit. A known last id resumes after it; any other start, and a gap,
 * begins with the current jobs.
 */
export async function streamDeposit(res: Response, depositId: number, sources: StreamSources): Promise<void> {
  const { events, currentJobs, lastEventId } = sources;
  res.status(200).set({
    'Content-Type': 'text/event-stream; charset=utf-8',
    'X-Accel-Buffering': 'no', // asks a proxy in between not to gather events
  });
  const send = (text: string): void => {
    if (res.writableEnded) return;
    res.write(text);
    if (res.writableLength > MAX_BEHIND_BYTES) res.destroy();
  };
  send(`retry: ${RECONNECT_MS}\n\n`);

  // Subscribed before the state is read: what happens in between is kept, and sent after it.
  let held: NumberedEvent[] | null = [];
  const missed = lastEventId === undefined ? null : events.since(depositId, lastEventId);
  const head = events.headOf(depositId);
  const unsubscribe = events.subscribe(depositId, (numbered) => {
    if (held) held.push(numbered);
    else send(asText(numbered));
  });
  const heartbeat = setInterval(() => send(': still here\n\n'), HEARTBEAT_MS);
  res.once('close', () => {
    clearInterval(heartbeat);
    unsubscribe();
  });

  const jobs = missed === null ? await currentJobs() : [];
  for (const job of jobs.toReversed()) send(asText({ id: head, event: { type: 'job', job } }));
  for (const numbered of [...(missed ?? []), ...held]) send(asText(numbered));
  held = null;
}
