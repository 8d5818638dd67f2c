import { describe, expect, it } from 'vitest';
import * as z from 'zod';
import '#contract/wording.ts';

const words = (schema: z.ZodType, value: unknown): string | undefined => schema.safeParse(value).error?.issues[0]?.message;

describe('what a schema refuses', () => {
  it.each([
    [z.number().positive(), 0, 'expected more than 0'],
    [z.number().min(0.1), 0, 'expected 0.1 or more'],
    [z.number().max(1), 2, 'expected 1 or less'],
    [z.number(), Number.NaN, 'expected a number'],
    [z.number().int(), 1.5, 'expected a whole number'],
    [z.string().min(1), '', 'expected some text'],
    [z.string().min(12), 'short', 'expected 12 characters or more'],
    [z.string().max(1), 'long', 'expected at most 1 character'],
    [z.array(z.number()).min(3), [1], 'expected 3 entries or more'],
    [z.array(z.number()).max(1), [1, 2], 'expected at most 1 entry'],
    [z.number().positive('expected a limit above 0'), 0, 'expected a limit above 0'],
  ])('is told in our words (%#)', (schema, value, message) => {
    expect(words(schema, value)).toBe(message);
  });
});
