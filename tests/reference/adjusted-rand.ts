/**
 * Adjusted Rand index of two labelings, 1 for the same grouping. Written from its definition, apart
 * from the kernel, so that no kernel judges itself.
 *
 * @see Hubert & Arabie (1985), Comparing partitions, J. Classif. 2.
 */
export function adjustedRand(a: readonly (string | number)[], b: readonly (string | number)[]): number {
  const both = pairsWithin(a.map((label, row) => `${label}|${b[row]}`));
  const [inA, inB] = [pairsWithin(a), pairsWithin(b)];
  const expected = (inA * inB) / ((a.length * (a.length - 1)) / 2);
  const ceiling = (inA + inB) / 2;
  return ceiling === expected || a.length < 2 ? 1 : (both - expected) / (ceiling - expected);
}

/** Pairs of rows that share a label. */
function pairsWithin(labels: readonly (string | number)[]): number {
  const counts = new Map<string | number, number>();
  for (const label of labels) counts.set(label, (counts.get(label) ?? 0) + 1);
  return [...counts.values()].reduce((sum, n) => sum + (n * (n - 1)) / 2, 0);
}
