import { KernelError } from '#kernels/kernel-error.ts';
import { averageLinkage, type TreeJoin } from '#kernels/clustering/average-linkage.ts';

/** A tree of codes by chemistry and by who lies beside whom. */
export interface ConsolidationTree {
  tree: TreeJoin[];
  /** Row-major, symmetric: what the tree was made of, 0 to 1. */
  dissimilarity: Float64Array;
}

/**
 * Tree for consolidating logging codes: average linkage on half the distance of centres (over the
 * largest) plus half of 1 - s, where s is the number of contacts of two codes over the smaller of their
 * contact counts. Codes alike in chemistry that are always logged against each other join first.
 *
 * @param distances Row-major (n, n) Aitchison distances of code centres.
 * @param contacts Row-major (n, n) contact counts, symmetric, diagonal 0 (`contactCounts`).
 * @throws {KernelError} `shape`; `bad-parameter` at a negative or asymmetric count or distance.
 */
export function consolidationTree(
  distances: Float64Array,
  contacts: ArrayLike<number>,
  n: number,
): ConsolidationTree {
  if (distances.length !== n * n || contacts.length !== n * n)
    throw new KernelError(
      'shape',
      `expected ${n} x ${n} distances and contacts, found ${distances.length}, ${contacts.length}`,
    );
  for (let at = 0; at < n * n; at++) {
    const [row, col] = [Math.floor(at / n), at % n];
    if (contacts[at]! >= 0 && contacts[at] === contacts[col * n + row]) continue;
    throw new KernelError(
      'bad-parameter',
      `expected symmetric contact counts >= 0, found ${contacts[at]}`,
      {
        row,
        col,
      },
    );
  }
  const most = distances.reduce((a, b) => Math.max(a, b), 0);
  const totals = Array.from({ length: n }, (_, row) => {
    let sum = 0;
    for (let col = 0; col < n; col++) sum += contacts[row * n + col]!;
    return sum;
  });
  const dissimilarity = distances.map((distance, at) => {
    const [row, col] = [Math.floor(at / n), at % n];
    if (row === col) return 0;
    const least = Math.min(totals[row]!, totals[col]!);
    const beside = least > 0 ? contacts[at]! / least : 0;
    return 0.5 * (most > 0 ? distance / most : 0) + 0.5 * (1 - beside);
  });
  return { tree: averageLinkage(dissimilarity, n), dissimilarity };
}
