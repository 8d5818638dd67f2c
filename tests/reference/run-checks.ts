import type { ReferenceCheck, ReferenceSet } from '#tests/support/reference.ts';
import type { Adapter } from './adapter.ts';
import { ALL_FUNCTIONS } from './all-functions.ts';
import { shortfalls, type Shortfall } from './compare.ts';

/** What became of one check. */
export interface CheckOutcome {
  check: ReferenceCheck;
  /** Information: marked fragile or collapsed by its set, computed, but no target. */
  verdict: 'passed' | 'failed' | 'information';
  /** Empty when the result agrees. */
  shortfalls: Shortfall[];
}

/** Computes every check of a set and compares it by the check's own rule; none is left out. */
export function runChecks(
  set: ReferenceSet,
  checks: readonly ReferenceCheck[] = set.checks,
  functions: ReadonlyMap<string, Adapter> = ALL_FUNCTIONS,
): CheckOutcome[] {
  return checks.map((check) => {
    const adapter = functions.get(check.function);
    const found = adapter ? computed(set, check, adapter) : [unknown(check)];
    return { check, verdict: verdictOf(check, adapter, found), shortfalls: found };
  });
}

function verdictOf(
  check: ReferenceCheck,
  adapter: Adapter | undefined,
  found: Shortfall[],
): CheckOutcome['verdict'] {
  if (adapter && (check.fragile || check.collapsed)) return 'information';
  return found.length === 0 ? 'passed' : 'failed';
}

const unknown = (check: ReferenceCheck): Shortfall => ({
  where: '',
  expected: 'a known function',
  found: `${check.group} ${check.function}`,
});

/** An error of a kernel or of the inputs is a shortfall of this check, and the rest goes on. */
function computed(set: ReferenceSet, check: ReferenceCheck, adapter: Adapter): Shortfall[] {
  try {
    return shortfalls(set, check, adapter(set, check));
  } catch (error) {
    const words = error instanceof Error ? error.message : String(error);
    return [{ where: '', expected: 'a result', found: `an error: ${words}` }];
  }
}

/** One line for an outcome: id, rule, and the first places where it falls short. */
export function outcomeLine({ check, shortfalls: found }: CheckOutcome): string {
  const { compare } = check.tolerance;
  const places = found
    .slice(0, 3)
    .map(
      ({ where, expected, found: was }) => `${where || 'value'} expected ${expected}, found ${was}`,
    );
  const more = found.length > 3 ? `; ${found.length - 3} more` : '';
  const words = places.length === 0 ? 'agrees' : `${places.join('; ')}${more}`;
  return `${check.id} (${compare}): ${words}`;
}
