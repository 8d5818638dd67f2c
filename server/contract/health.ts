import * as z from 'zod';
import { endpoint } from './endpoint.ts';
import { Instant, Opaque } from './common.ts';

const tag = 'Service';
export const getHealth = endpoint({
  id: 'getHealth', method: 'get', path: '/health', tag, access: { kind: 'public' }, summary: 'The process answers', response: z.object({ ok: z.literal(true) }),
});
export const getReadiness = endpoint({
  id: 'getReadiness', method: 'get', path: '/health/ready', tag, access: { kind: 'public' }, summary: 'Database, disk and compute host are ready (503 with the cause if not)',
  response: z.object({ ok: z.boolean(), causes: z.array(z.string()) }),
});
export const getOpenApi = endpoint({
  id: 'getOpenApi', method: 'get', path: '/openapi.json', tag, access: { kind: 'public' }, summary: 'This description, OpenAPI 3.1', response: Opaque,
});

export const MailboxMessage = z.object({ id: z.number().int(), at: Instant, to: z.string(), subject: z.string(), text: z.string() });
export type MailboxMessage = z.infer<typeof MailboxMessage>;
export const readMailbox = endpoint({
  id: 'readMailbox', method: 'get', path: '/mailbox', tag, access: { kind: 'public' },
  summary: 'Messages the built-in mail server caught (demonstration and development only; 404 elsewhere)', response: z.array(MailboxMessage),
});
