import { KernelError } from '#kernels/kernel-error.ts';

/** Rows of both groups up to which every count of orders is a whole number a double holds. */
export const MOST_ROWS_EXACT = 50;

/**
 * Exact law of the Mann-Whitney U of two groups of one population without ties: of the m + n rows in
 * order, the last belongs to the first group (and stands above all n of the second) or to the second.
 *
 * @param m, n Rows of the groups, >= 1, together at most 50.
 * @returns Number of orders by u, 0 to m n; they sum to the binomial coefficient (m + n over m).
 * @throws {KernelError} `bad-parameter`.
 * @see Mann & Whitney (1947), Annals of Mathematical Statistics 18, 50-60, for the recurrence.
 */
export function ordersByU(m: number, n: number): Float64Array {
  if (!(
    Number.isInteger(m) &&
    Number.isInteger(n) &&
    m >= 1 &&
    n >= 1 &&
    m + n <= MOST_ROWS_EXACT
  )) {
    const message = `expected two groups of 1 row or more, ${MOST_ROWS_EXACT} together, found ${m}, ${n}`;
    throw new KernelError('bad-parameter', message);
  }
  let byN = Array.from({ length: n + 1 }, () => Float64Array.of(1));
  for (let i = 1; i <= m; i++) {
    const next = [Float64Array.of(1)];
    for (let j = 1; j <= n; j++) {
      const lastIsFirst = byN[j]!;
      const lastIsSecond = next[j - 1]!;
      next.push(
        Float64Array.from(
          { length: i * j + 1 },
          (_, u) => (lastIsFirst[u - j] ?? 0) + (lastIsSecond[u] ?? 0),
        ),
      );
    }
    byN = next;
  }
  return byN[n]!;
}

/**
 * Exact two-sided p of a Mann-Whitney U: twice the share of orders as far out on its side, at most 1.
 *
 * @param u A whole number from 0 to m n (no ties).
 * @throws {KernelError} `bad-parameter`.
 */
export function exactTwoSidedP(u: number, m: number, n: number): number {
  const orders = ordersByU(m, n);
  const far = Math.min(u, m * n - u);
  if (!(Number.isInteger(far) && far >= 0)) {
    throw new KernelError('bad-parameter', `expected u whole from 0 to ${m * n}, found ${u}`);
  }
  const sumOf = (counts: Float64Array) => counts.reduce((sum, count) => sum + count, 0);
  return Math.min(1, (2 * sumOf(orders.subarray(0, far + 1))) / sumOf(orders));
}
