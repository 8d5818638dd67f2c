import * as z from 'zod';
import { Analyte, DepositParams, Done, Id, Instant, Name, Note, PersonRef, Version } from './common.ts';
import { endpoint } from './endpoint.ts';
import { ANALYSTS, ANY_MEMBER } from './roles.ts';

export const SuiteBody = z.strictObject({
  name: Name,
  note: Note.default(''),
  /** Drill intervals or surface samples; an analysis uses one of them. */
  support: z.enum(['drill', 'surface']),
  analytes: z.array(Analyte).min(3).max(80).refine((list) => new Set(list).size === list.length, 'expected each analyte once'),
  /** A value below its limit becomes this share of the limit (multiplicative simple replacement). */
  replacementFraction: z.number().min(0.1).max(1).default(0.65),
});
export type SuiteBody = z.infer<typeof SuiteBody>;
export type SuiteBodyInput = z.input<typeof SuiteBody>;

export const Suite = SuiteBody.extend({
  id: z.number().int(),
  version: Version,
  createdBy: PersonRef,
  createdAt: Instant,
  /** Component runs that stand on it; a suite in use is changed by making a new one. */
  runs: z.number().int(),
});
export type Suite = z.infer<typeof Suite>;

const tag = 'Suites';
const read = { kind: 'deposit', roles: ANY_MEMBER } as const;
const write = { kind: 'deposit', roles: ANALYSTS } as const;
const SuiteParams = DepositParams.extend({ suiteId: Id });

export const listSuites = endpoint({
  id: 'listSuites', method: 'get', path: '/deposits/:depositId/suites', tag, access: read, summary: 'Suites, newest first', params: DepositParams, response: z.array(Suite),
});
export const createSuite = endpoint({
  id: 'createSuite', method: 'post', path: '/deposits/:depositId/suites', tag, access: write, summary: 'Choose analytes and how values below detection are treated',
  params: DepositParams, body: SuiteBody, response: Suite, status: 201, idempotent: true,
});
export const updateSuite = endpoint({
  id: 'updateSuite', method: 'put', path: '/deposits/:depositId/suites/:suiteId', tag, access: write,
  summary: 'Change a suite (409 for its analytes once components stand on it)', params: SuiteParams, body: SuiteBody, response: Suite, ifMatch: true,
});
export const deleteSuite = endpoint({
  id: 'deleteSuite', method: 'delete', path: '/deposits/:depositId/suites/:suiteId', tag, access: write, summary: 'Delete a suite nothing stands on', params: SuiteParams, response: Done, ifMatch: true,
});
