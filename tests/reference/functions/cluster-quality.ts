import { silhouette } from '#kernels/clustering/silhouette.ts';
import { groupValidity } from '#kernels/clustering/validity.ts';
import { givenLabels, type ReferenceCheck, type ReferenceSet } from '#tests/support/reference.ts';
import type { Adapters } from '../adapter.ts';
import { transformedColumns } from '../transform.ts';

/** Widths over all rows, never a sample of them. */
function widths(set: ReferenceSet, check: ReferenceCheck) {
  const labels = givenLabels(set, check);
  return silhouette(transformedColumns(set, check), labels, { sampleSize: labels.length });
}

/** How well given labels part the points. */
export const CLUSTER_QUALITY: Adapters = {
  silhouette_average_width: (set, check) => widths(set, check).mean,
  silhouette_cluster_widths: (set, check) => widths(set, check).byLabel.map(({ mean }) => mean),
  calinski_harabasz: (set, check) =>
    groupValidity(transformedColumns(set, check), givenLabels(set, check)).calinskiHarabasz,
};
