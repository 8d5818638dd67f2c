import { useQueryClient, type QueryClient } from '@tanstack/react-query';
import { useEffect } from 'react';
import { DepositEvent, streamEvents } from '#contract/jobs.ts';
import { endpointUrl } from './api-client.ts';
import { jobsQuery, rememberJob } from './jobs.ts';

/** What almost any change may alter. */
const ALWAYS = ['stages', 'overview'];

/** One event: a job moved, or a resource changed and what was read of it is old. */
export function applyDepositEvent(
  queryClient: QueryClient,
  depositId: number,
  event: DepositEvent,
): void {
  if (event.type === 'job') {
    if (rememberJob(queryClient, event.job)) refresh(queryClient, depositId, ALWAYS);
    return;
  }
  refresh(queryClient, depositId, [event.resource, ...ALWAYS]);
}

function refresh(queryClient: QueryClient, depositId: number, resources: string[]): void {
  for (const resource of resources) {
    void queryClient.invalidateQueries({ queryKey: ['deposits', depositId, resource] });
  }
}

function parseEvent(text: unknown): DepositEvent | null {
  if (typeof text !== 'string') return null;
  try {
    const parsed = DepositEvent.safeParse(JSON.parse(text));
    return parsed.success ? parsed.data : null;
  } catch {
    return null;
  }
}

/**
 * Listens to a deposit while its pages are open. After a gap everything of the deposit is read
 * again, because events may have been missed; the browser itself reconnects.
 */
export function useDepositEvents(depositId: number): void {
  const queryClient = useQueryClient();
  useEffect(() => {
    if (typeof EventSource === 'undefined') return;
    const source = new EventSource(endpointUrl(streamEvents, { params: { depositId } }));
    let hadGap = false;
    const onEvent = (message: MessageEvent<unknown>) => {
      const event = parseEvent(message.data);
      if (event) applyDepositEvent(queryClient, depositId, event);
    };
    source.onerror = () => {
      hadGap = true;
      void queryClient.invalidateQueries({ queryKey: jobsQuery(depositId).queryKey });
    };
    source.onopen = () => {
      if (hadGap) void queryClient.invalidateQueries({ queryKey: ['deposits', depositId] });
      hadGap = false;
    };
    for (const name of ['message', 'job', 'changed']) source.addEventListener(name, onEvent);
    return () => source.close();
  }, [depositId, queryClient]);
}
