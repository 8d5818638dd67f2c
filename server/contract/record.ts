import * as z from 'zod';
import { DepositParams, Instant, PageQuery, pageOf, Opaque } from './common.ts';
import { endpoint } from './endpoint.ts';
import { ANY_MEMBER } from './roles.ts';

/** One line of the append-only audit record. `hash` covers the entry and the hash before it. */
export const AuditEntry = z.object({
  /** Place in the chain of its deposit, from 1. */
  number: z.number().int(),
  at: Instant,
  who: z.string(),
  /** Stable verb, for example `domain.created`. */
  action: z.string(),
  /** The sentence people read. */
  sentence: z.string(),
  subject: z.string(),
  hash: z.string(),
});
export type AuditEntry = z.infer<typeof AuditEntry>;

const tag = 'Record';
const access = { kind: 'deposit', roles: ANY_MEMBER } as const;

export const listAudit = endpoint({
  id: 'listAudit', method: 'get', path: '/deposits/:depositId/record', tag, access, summary: 'Audit record, newest first',
  params: DepositParams, query: PageQuery.extend({ text: z.string().max(120).optional() }),
  response: pageOf(AuditEntry).extend({ chain: z.object({ holds: z.boolean(), entries: z.number().int(), head: z.string(), firstBadEntry: z.number().int().nullable() }) }),
});
export const downloadAudit = endpoint({
  id: 'downloadAudit', method: 'get', path: '/deposits/:depositId/record.csv', tag, access, produces: 'csv', summary: 'Audit record as CSV', params: DepositParams, response: Opaque,
});
