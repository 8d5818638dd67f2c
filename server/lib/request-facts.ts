import { randomUUID } from 'node:crypto';
import type { IncomingMessage } from 'node:http';

/** What the log may say of a request. Its URL is not among it: links hold one-time tokens. */
export interface RequestFacts {
  requestId: string;
  /** Route pattern, for example `/deposits/:depositId`; null until one matched. */
  route: string | null;
  userId: number | null;
  depositId: number | null;
}

const known = new WeakMap<IncomingMessage, RequestFacts>();

/** The request's facts, made at the first asking; whoever learns more writes it here. */
export function requestFacts(req: IncomingMessage): RequestFacts {
  const found = known.get(req);
  if (found) return found;
  const facts: RequestFacts = {
    requestId: randomUUID(),
    route: null,
    userId: null,
    depositId: null,
  };
  known.set(req, facts);
  return facts;
}
