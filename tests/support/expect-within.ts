import { expect } from 'vitest';
import { shortfalls, type ReferenceResult } from '#tests/reference/compare.ts';
import { ownerOf, type ReferenceCheck } from './reference.ts';

export type { ReferenceResult };

/** Fails the test unless a result agrees with the check under the check's own tolerance rule. */
export function expectWithin(check: ReferenceCheck, result: ReferenceResult): void {
  const label = `${check.id} (${check.software})`;
  expect(shortfalls(ownerOf(check), check, result), label).toEqual([]);
}
