import { KernelError } from '#kernels/kernel-error.ts';
import { checkCategory, NOT_LOGGED, type Category } from './category.ts';

/** Values split by a label column; levels without a value are left out. */
export interface GroupedValues {
  levels: string[];
  /** One array per level, in row order. */
  groups: Float64Array[];
  nUsed: number;
  nDropped: number;
}

/**
 * Splits a value column by label. Rows without a value (NaN) or a label are dropped and counted.
 *
 * @throws {KernelError} `shape`; `bad-parameter` at a code without level.
 */
export function groupValues(values: Float64Array, label: Category): GroupedValues {
  checkCategory(label, values.length, 'label');
  const lists = label.levels.map((): number[] => []);
  values.forEach((value, i) => {
    const code = label.codes[i]!;
    if (code !== NOT_LOGGED && !Number.isNaN(value)) lists[code]?.push(value);
  });
  const nUsed = lists.reduce((sum, list) => sum + list.length, 0);
  return {
    levels: label.levels.filter((_, code) => lists[code]!.length > 0),
    groups: lists.filter((list) => list.length > 0).map((list) => Float64Array.from(list)),
    nUsed,
    nDropped: values.length - nUsed,
  };
}

/** Refuses a list of groups that cannot be compared. @throws {KernelError} `too-few-groups`. */
export function checkGroups(groups: readonly Float64Array[]): void {
  const filled = groups.filter((group) => group.length > 0).length;
  if (filled < 2 || filled < groups.length) {
    throw new KernelError(
      'too-few-groups',
      `expected 2 or more groups with values, found ${filled} of ${groups.length}`,
    );
  }
}

/** Every pair (a, b), a < b, of `count` groups in the order 01, 02, ..., 12, ... */
export function pairsOf(count: number): [number, number][] {
  return Array.from({ length: count }, (_, a) =>
    Array.from({ length: count - a - 1 }, (_b, k): [number, number] => [a, a + k + 1]),
  ).flat();
}
