import * as z from 'zod';
import { Id } from '#contract/common.ts';

/** Parameters as the job rows keep them. */
export const SweepParams = z.strictObject({ componentRunId: Id, components: z.number().int(), kFrom: z.number().int(), kTo: z.number().int(), seed: z.number().int() });
export type SweepParams = z.infer<typeof SweepParams>;
export const GroupingParams = z.strictObject({ componentRunId: Id, components: z.number().int(), k: z.number().int(), seed: z.number().int(), name: z.string().optional() });
export type GroupingParams = z.infer<typeof GroupingParams>;
