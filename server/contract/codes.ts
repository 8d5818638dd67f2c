import * as z from 'zod';
import { DepositParams, Id, Instant, Opaque, PersonRef } from './common.ts';
import { endpoint } from './endpoint.ts';
import { JobStarted } from './jobs.ts';
import { ANALYSTS, ANY_MEMBER } from './roles.ts';

/** One frozen recipe line: groups of a grouping that become a code. */
export const RecipeRule = z.object({ code: z.string(), name: z.string(), groupLabels: z.array(z.number().int()), groupNames: z.array(z.string()) });

/**
 * Codes made from a frozen recipe on a snapshot. The file is CSV, UTF-8, LF, sorted by hole then
 * from; the same snapshot and recipe give the same bytes and so the same SHA-256.
 */
export const CodeSet = z.object({
  id: z.number().int(), number: z.number().int(), snapshotId: z.string(), snapshotNumber: z.number().int(), groupingId: z.number().int(), zoneRunId: z.number().int().nullable(), isStale: z.boolean(),
  recipe: z.object({ rules: z.array(RecipeRule), recipeSha256: z.string() }),
  rows: z.number().int(), metres: z.number(), sizeBytes: z.number().int(), sha256: z.string(), fileName: z.string(),
  byCode: z.array(z.object({ code: z.string(), name: z.string(), slot: z.number().int().nullable(), intervals: z.number().int(), metres: z.number() })),
  notes: z.array(z.string()), createdBy: PersonRef, createdAt: Instant,
});
export type CodeSet = z.infer<typeof CodeSet>;

/** Columns of the codes file, in order. Surface sets leave from and to empty and name the sample as hole. */
export const CODE_COLUMNS = ['hole', 'from_m', 'to_m', 'length_m', 'domain', 'group', 'membership', 'deleterious', 'snapshot'] as const;

const tag = 'Releases';
const read = { kind: 'deposit', roles: ANY_MEMBER, codes: true } as const;
const write = { kind: 'deposit', roles: ANALYSTS } as const;
const CodeParams = DepositParams.extend({ codeSetId: Id });

export const listCodeSets = endpoint({
  id: 'listCodeSets', method: 'get', path: '/deposits/:depositId/code-sets', tag, access: read, summary: 'Sets of codes, newest first', params: DepositParams, response: z.array(CodeSet),
});
export const getCodeSet = endpoint({
  id: 'getCodeSet', method: 'get', path: '/deposits/:depositId/code-sets/:codeSetId', tag, access: read, summary: 'One set of codes', params: CodeParams, response: CodeSet,
});
export const makeCodes = endpoint({
  id: 'makeCodes', method: 'post', path: '/deposits/:depositId/code-sets', tag, access: write, summary: 'Give every interval its one code by the domains now accepted', params: DepositParams, response: JobStarted, status: 202, idempotent: true,
});
export const downloadCodes = endpoint({
  id: 'downloadCodes', method: 'get', path: '/deposits/:depositId/code-sets/:codeSetId/file', tag, access: read, produces: 'csv', summary: 'The codes as CSV; `Repr-Digest` (RFC 9530) and `X-Content-SHA256` hold the checksum', params: CodeParams, response: Opaque,
});
export const verifyCodes = endpoint({
  id: 'verifyCodes', method: 'post', path: '/deposits/:depositId/code-sets/:codeSetId/verify', tag,
  access: { kind: 'deposit', roles: ['lead', 'geologist', 'geometallurgist', 'site-geologist', 'estimator'] },
  summary: 'Make the codes again from the same snapshot and recipe and compare the bytes', params: CodeParams,
  response: z.object({ same: z.boolean(), recorded: z.string(), again: z.string(), at: Instant }),
});
