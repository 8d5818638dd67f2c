import * as z from 'zod';

/** One field that was refused: what was expected and what was found. */
export const FieldProblem = z.object({
  path: z.string(),
  message: z.string(),
});
export type FieldProblem = z.infer<typeof FieldProblem>;

/**
 * Error answer, RFC 9457 (`application/problem+json`). `type` is stable (`/problems/<code>`); `code`
 * is its last part, for programs; `detail` says what was expected, what was found and where.
 */
export const Problem = z.object({
  type: z.string(),
  title: z.string(),
  status: z.number().int(),
  code: z.string(),
  detail: z.string(),
  requestId: z.string(),
  fields: z.array(FieldProblem).optional(),
  /** With 412: the version now current. */
  currentVersion: z.number().int().optional(),
});
export type Problem = z.infer<typeof Problem>;
