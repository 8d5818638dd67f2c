import * as z from 'zod';
import { DepositParams, Id, Opaque } from './common.ts';
import { endpoint } from './endpoint.ts';
import { ANY_MEMBER } from './roles.ts';

/**
 * What an assay's number means, one byte a row. With `below` and `above` the value is the limit that
 * was passed (`<0.5` keeps 0.5); with `missing` and `notAnalysed` it is NaN.
 */
export const QUALIFIER = { measured: 0, below: 1, above: 2, missing: 3, notAnalysed: 4 } as const;

export const COLUMN_KINDS = ['number', 'assay', 'category', 'text'] as const;
export const ColumnKind = z.enum(COLUMN_KINDS);
export type ColumnKind = z.infer<typeof ColumnKind>;

/** A column's free description, kept as it was written: method, detection limit, treatment. */
export const ColumnMeta = z.record(z.string(), z.unknown());
export type ColumnMeta = z.infer<typeof ColumnMeta>;

export const ColumnInfo = z.object({
  name: z.string(),
  kind: ColumnKind,
  unit: z.string().nullable(),
  /** Of a category: the text of code 0, 1, 2, …; null for other kinds. */
  dictionary: z.array(z.string()).nullable(),
  meta: ColumnMeta.nullable(),
});
export type ColumnInfo = z.infer<typeof ColumnInfo>;

export const TableInfo = z.object({
  id: z.number().int(),
  nRows: z.number().int(),
  purpose: z.string(),
  columns: z.array(ColumnInfo),
});
export type TableInfo = z.infer<typeof TableInfo>;

const tag = 'Tables';
const access = { kind: 'deposit', roles: ANY_MEMBER } as const;
const TableParams = DepositParams.extend({ tableId: Id });
const RowNumber = z.coerce.number().int().nonnegative();

export const getTable = endpoint({
  id: 'getTable', method: 'get', path: '/deposits/:depositId/tables/:tableId', tag, access,
  summary: 'What a table of columns holds', params: TableParams, response: TableInfo,
});
export const readColumn = endpoint({
  id: 'readColumn', method: 'get', path: '/deposits/:depositId/tables/:tableId/columns/:column', tag, access, produces: 'binary',
  summary: 'One column from row `from` up to, not including, row `to`: little-endian float64 values or uint8 qualifiers (`X-Dtype`, `X-Length`); text as a JSON array',
  params: TableParams.extend({ column: z.string().min(1).max(200) }),
  query: z.strictObject({ part: z.enum(['values', 'qualifiers']).default('values'), from: RowNumber.optional(), to: RowNumber.optional() }),
  response: Opaque,
});
