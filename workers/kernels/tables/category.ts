import { KernelError } from '#kernels/kernel-error.ts';

/** Code of an interval whose label is null. */
export const NOT_LOGGED = -1;

/** A label column in coded form: `codes[i]` is an index into `levels`, or NOT_LOGGED. */
export interface Category {
  readonly levels: readonly string[];
  readonly codes: Int32Array;
}

/** Order of two texts by code point, the same on every machine and locale. */
export function compareCodePoints(a: string, b: string): number {
  const left = Array.from(a);
  const right = Array.from(b);
  for (let i = 0; i < Math.min(left.length, right.length); i++) {
    const difference = (left[i]?.codePointAt(0) ?? 0) - (right[i]?.codePointAt(0) ?? 0);
    if (difference !== 0) return difference;
  }
  return left.length - right.length;
}

/**
 * Codes a column of labels. Levels are sorted by code point, so the order of rows cannot change them.
 *
 * @param labels One per interval; null where nothing is logged. Used as given: no trimming.
 */
export function categoryFrom(labels: readonly (string | null)[]): Category {
  const levels = [...new Set(labels.filter((label) => label !== null))].sort(compareCodePoints);
  const codeOf = new Map(levels.map((level, code) => [level, code]));
  const code = (label: string | null) =>
    label === null ? NOT_LOGGED : (codeOf.get(label) ?? NOT_LOGGED);
  return { levels, codes: Int32Array.from(labels, code) };
}

/**
 * Refuses a coded column that does not fit its table.
 *
 * @throws {KernelError} `shape` when its length is not n; `bad-parameter` with { row } at a code
 *   that names no level.
 */
export function checkCategory({ levels, codes }: Category, n: number, name: string): void {
  if (codes.length !== n) {
    throw new KernelError('shape', `expected ${n} ${name} codes, found ${codes.length}`);
  }
  for (let row = 0; row < n; row++) {
    const code = codes[row]!;
    if (code < NOT_LOGGED || code >= levels.length) {
      const expected = `expected a ${name} code in -1..${levels.length - 1}`;
      throw new KernelError('bad-parameter', `${expected}, found ${code} in row ${row}`, { row });
    }
  }
}
