import { squaredDistance } from '#kernels/dense/squared-distance.ts';
import { groupedPoints, type GroupedPoints, type Labels } from './group-moments.ts';

/** How compact and how far apart the groups of a labelling are; every row counts the same. */
export interface GroupValidity {
  /** Squared distances to the own group's mean, W. */
  within: number;
  /** Squared distances of group means to the overall mean by rows, B; W + B is the total. */
  between: number;
  /** (B / (k - 1)) / (W / (n - k)), higher is better; null with one group, n = k or W = 0. */
  calinskiHarabasz: number | null;
  /** Mean over groups of the worst (S_i + S_j) / d_ij, lower is better; null with one group or equal means. */
  daviesBouldin: number | null;
  /** Silhouette with distances to group means in place of mean distances to rows; null with one group. */
  simplifiedSilhouette: number | null;
  k: number;
  n: number;
}

/**
 * Validity indices that need only group means; O(n k p).
 *
 * @param columns p columns of n rows in the clustering space; rows with NaN are left out.
 * @param labels 1..K per row, 0 = unassigned (left out).
 * @throws {KernelError} Those of `groupedPoints`.
 * @see Caliński & Harabasz (1974), Commun. Stat. 3; Davies & Bouldin (1979), IEEE PAMI 1 (from memory).
 */
export function groupValidity(columns: readonly Float64Array[], labels: Labels): GroupValidity {
  return validityOf(groupedPoints(columns, labels));
}

/** {@link groupValidity} of rows already gathered by group. */
export function validityOf(grouped: GroupedPoints): GroupValidity {
  const { n, k } = grouped;
  const { within, between } = sumsOfSquares(grouped);
  const severalGroups = k > 1;
  const hasRatio = severalGroups && n > k && within > 0;
  const calinskiHarabasz = hasRatio ? between / (k - 1) / (within / (n - k)) : null;
  return {
    within,
    between,
    calinskiHarabasz,
    daviesBouldin: severalGroups ? daviesBouldin(grouped) : null,
    simplifiedSilhouette: severalGroups ? simplifiedSilhouette(grouped) : null,
    k,
    n,
  };
}

function sumsOfSquares({ points, n, p, group, sizes, centroids }: GroupedPoints) {
  const mean = new Float64Array(p);
  for (let at = 0; at < centroids.length; at++)
    mean[at % p]! += (sizes[Math.floor(at / p)]! / n) * centroids[at]!;
  let within = 0;
  for (let i = 0; i < n; i++) within += squaredDistance(points, i, centroids, group[i]!, p);
  const between = sizes.reduce(
    (sum, size, g) => sum + size * squaredDistance(centroids, g, mean, 0, p),
    0,
  );
  return { within, between };
}

function daviesBouldin({ points, n, p, group, k, sizes, centroids }: GroupedPoints): number | null {
  const scatter = new Float64Array(k);
  for (let i = 0; i < n; i++)
    scatter[group[i]!]! +=
      Math.sqrt(squaredDistance(points, i, centroids, group[i]!, p)) / sizes[group[i]!]!;
  let sum = 0;
  for (let a = 0; a < k; a++) {
    let worst = 0;
    for (let b = 0; b < k; b++) {
      if (a !== b)
        worst = Math.max(
          worst,
          (scatter[a]! + scatter[b]!) / Math.sqrt(squaredDistance(centroids, a, centroids, b, p)),
        );
    }
    sum += worst;
  }
  return Number.isFinite(sum) ? sum / k : null;
}

function simplifiedSilhouette({ points, n, p, group, k, centroids }: GroupedPoints): number {
  let sum = 0;
  for (let i = 0; i < n; i++) {
    let nextSq = Infinity;
    for (let g = 0; g < k; g++)
      if (g !== group[i]) nextSq = Math.min(nextSq, squaredDistance(points, i, centroids, g, p));
    const own = Math.sqrt(squaredDistance(points, i, centroids, group[i]!, p));
    const next = Math.sqrt(nextSq);
    sum += own === next ? 0 : (next - own) / Math.max(next, own);
  }
  return sum / n;
}
