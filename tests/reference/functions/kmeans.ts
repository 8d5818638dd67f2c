import { kMeans, type KMeansResult } from '#kernels/clustering/k-means.ts';
import type { ReferenceCheck, ReferenceSet } from '#tests/support/reference.ts';
import { dataKey, inputNumber, remembered, type Adapters } from '../adapter.ts';
import { transformedColumns } from '../transform.ts';

/** Starts enough for the best optimum known of tables of this size. */
const RESTARTS = 60;

const fits = remembered<KMeansResult>();

function fit(set: ReferenceSet, check: ReferenceCheck): KMeansResult {
  const k = inputNumber(check, 'k');
  return fits(`${dataKey(set, check)} ${k}`, () => {
    const columns = transformedColumns(set, check);
    return kMeans({ columns, k, seed: 1, restarts: RESTARTS, sampleSize: columns[0]?.length });
  });
}

/** The best k-means partition. */
export const KMEANS: Adapters = {
  kmeans_best_inertia: (set, check) => fit(set, check).inertia,
  kmeans_sizes_sorted: (set, check) => fit(set, check).sizes.toSorted((a, b) => b - a),
  kmeans_labels: (set, check) => fit(set, check).labels,
};
