import { KernelError } from '#kernels/kernel-error.ts';
import { checkCategory, NOT_LOGGED, type Category } from '#kernels/tables/category.ts';

/** A question about an interval; a missing value makes the answer unknown. */
export type Condition =
  | { kind: 'is'; column: string; levels: readonly string[] }
  /** min <= value < max; null is no bound. */
  | { kind: 'between'; column: string; min: number | null; max: number | null }
  | { kind: 'not'; of: Condition }
  | { kind: 'all'; of: readonly Condition[] }
  | { kind: 'any'; of: readonly Condition[] };

/** A column that conditions may name: labels, or numbers with NaN where missing. */
export type RuleColumn = Category | Float64Array;

/** Answers in the order that makes `all` the least and `any` the greatest. */
export const TRUTH = { no: 0, unknown: 1, yes: 2 } as const;

/**
 * Answers a condition for every interval in three-valued logic: unknown OR yes is yes, unknown AND no
 * is no, NOT unknown is unknown.
 *
 * @param columns By name, n values each.
 * @returns A TRUTH value for each interval.
 * @throws {KernelError} `unknown-column` with { column }; `wrong-kind` when labels are compared as
 *   numbers or the reverse; `bad-parameter` at bounds that hold no value; `shape`.
 * @see Kleene (1952), Introduction to Metamathematics, section 64 (from memory).
 */
export function evaluateCondition(
  condition: Condition,
  columns: ReadonlyMap<string, RuleColumn>,
  n: number,
): Uint8Array {
  switch (condition.kind) {
    case 'is':
      return isOneOf(labelsOf(condition.column, columns, n), condition.levels);
    case 'between':
      return isBetween(numbersOf(condition.column, columns, n), condition.min, condition.max);
    case 'not':
      return evaluateCondition(condition.of, columns, n).map((truth) => TRUTH.yes - truth);
    case 'all':
      return combined(condition.of, columns, n, TRUTH.yes, Math.min);
    case 'any':
      return combined(condition.of, columns, n, TRUTH.no, Math.max);
  }
}

function combined(
  parts: readonly Condition[],
  columns: ReadonlyMap<string, RuleColumn>,
  n: number,
  empty: number,
  pick: (a: number, b: number) => number,
): Uint8Array {
  const truths = new Uint8Array(n).fill(empty);
  for (const part of parts) {
    const more = evaluateCondition(part, columns, n);
    for (let row = 0; row < n; row++) truths[row] = pick(truths[row]!, more[row]!);
  }
  return truths;
}

function isOneOf({ levels, codes }: Category, wanted: readonly string[]): Uint8Array {
  const isWanted = levels.map((level) => wanted.includes(level));
  return Uint8Array.from(codes, (code) =>
    code === NOT_LOGGED ? TRUTH.unknown : isWanted[code] ? TRUTH.yes : TRUTH.no,
  );
}

function isBetween(values: Float64Array, min: number | null, max: number | null): Uint8Array {
  const [low, high] = [min ?? -Infinity, max ?? Infinity];
  if (!(low < high)) {
    throw new KernelError(
      'bad-parameter',
      `expected a lower bound below the upper, found ${min} to ${max}`,
    );
  }
  return Uint8Array.from(values, (value) =>
    Number.isNaN(value)
      ? TRUTH.unknown
      : value >= low && (max === null || value < high)
        ? TRUTH.yes
        : TRUTH.no,
  );
}

function columnOf(name: string, columns: ReadonlyMap<string, RuleColumn>): RuleColumn {
  const column = columns.get(name);
  if (column) return column;
  const known = [...columns.keys()].join(', ');
  throw new KernelError('unknown-column', `expected one of ${known}, found ${name}`, {
    column: name,
  });
}

function labelsOf(name: string, columns: ReadonlyMap<string, RuleColumn>, n: number): Category {
  const column = columnOf(name, columns);
  if (column instanceof Float64Array) {
    throw new KernelError('wrong-kind', `expected labels in ${name}, found numbers`, {
      column: name,
    });
  }
  checkCategory(column, n, name);
  return column;
}

function numbersOf(
  name: string,
  columns: ReadonlyMap<string, RuleColumn>,
  n: number,
): Float64Array {
  const column = columnOf(name, columns);
  if (!(column instanceof Float64Array)) {
    throw new KernelError('wrong-kind', `expected numbers in ${name}, found labels`, {
      column: name,
    });
  }
  if (column.length !== n)
    throw new KernelError('shape', `expected ${n} values of ${name}, found ${column.length}`);
  return column;
}
