import * as z from 'zod';

export const Id = z.coerce.number().int().positive().max(Number.MAX_SAFE_INTEGER);
/** UTC instant, ISO 8601. */
export const Instant = z.iso.datetime();
export const Name = z.string().trim().min(1).max(120);
export const Note = z.string().trim().max(4000);
export const Email = z.email().max(254).transform((email) => email.toLowerCase());
export const Version = z.number().int().nonnegative();
/** Slot 1–16 in the fixed order of category colours and marks (8 colours, then hollow marks). */
export const ColourSlot = z.number().int().min(1).max(16);
export const Finite = z.number();
/** An element symbol (`Cu`) or another named analyte (`LOI`). */
export const Analyte = z.string().trim().regex(/^[A-Z][A-Za-z0-9]{0,11}$/, 'expected an element symbol such as Cu');

export const DepositParams = z.strictObject({ depositId: Id });

export const PageQuery = z.strictObject({
  page: z.coerce.number().int().min(1).default(1),
  pageSize: z.coerce.number().int().min(1).max(500).default(100),
});

/** A page of a list: `total` counts the whole list. */
export const pageOf = <Row extends z.ZodType>(row: Row) =>
  z.object({ rows: z.array(row), total: z.number().int(), page: z.number().int(), pageSize: z.number().int() });

export const PersonRef = z.object({ id: z.number().int(), name: z.string() });
export type PersonRef = z.infer<typeof PersonRef>;

export const Done = z.object({ done: z.literal(true) });
/** Answers without a JSON body (files, streams, arrays); documents only. */
export const Opaque = z.unknown();
