import type { DepositEvent } from '#contract/jobs.ts';
import type { TestClient } from '#tests/support/test-client.ts';
import type { Who } from '#tests/support/people.ts';

export interface ReadEvent {
  id: string;
  event: DepositEvent;
}

export interface EventReader {
  status: number;
  contentType: string | null;
  events: ReadEvent[];
  /** Resolves when the server has ended the stream. */
  ended: Promise<void>;
  cut(): void;
}

/** Reads a deposit's event stream over HTTP until it is cut. */
export async function readEvents(client: TestClient, who: Exclude<Who, null>, lastEventId?: string): Promise<EventReader> {
  const abort = new AbortController();
  const cookie = `${client.env.isHttps ? '__Host-selvage' : 'selvage'}=${client.of(who).cookie}`;
  const resume: Record<string, string> = lastEventId === undefined ? {} : { 'Last-Event-ID': lastEventId };
  const res = await fetch(`${client.url}/api/deposits/${client.depositId}/events`, {
    headers: { Cookie: cookie, 'Sec-Fetch-Site': 'same-origin', ...resume }, signal: abort.signal,
  });
  const events: ReadEvent[] = [];
  const read = async (): Promise<void> => {
    let text = '';
    const decoder = new TextDecoder();
    for await (const piece of res.body ?? []) {
      text += decoder.decode(piece, { stream: true });
      const blocks = text.split('\n\n');
      text = blocks.pop() ?? '';
      for (const block of blocks) {
        const match = /^id: (\S+)\ndata: (.+)$/.exec(block);
        if (match) events.push({ id: match[1] ?? '', event: JSON.parse(match[2] ?? '') as DepositEvent });
      }
    }
  };
  return {
    status: res.status,
    contentType: res.headers.get('content-type'),
    events,
    ended: read().catch(() => undefined),
    cut: () => abort.abort(),
  };
}
