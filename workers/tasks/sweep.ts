import type { Sweep } from '#contract/groupings.ts';
import { sweepGroups } from '#kernels/clustering/sweep.ts';
import { supportRange, type SnapshotTables, type Support } from '#workers/frame/snapshot-tables.ts';
import { defineTask } from '#workers/task.ts';
import { componentNames } from '#workers/frame/component-names.ts';

export interface SweepInput {
  componentTableId: number;
  tables: SnapshotTables;
  support: Support;
  components: number;
  kFrom: number;
  kTo: number;
  seed: number;
}

export type SweepOutput = Pick<Sweep, 'kFrom' | 'kTo' | 'rows' | 'silhouetteRows' | 'suggestedK' | 'suggestion'>;

/** k-means for each number of groups, with the criteria side by side. */
export default defineTask<SweepInput, SweepOutput>(({ componentTableId, tables, support, components, kFrom, kTo, seed }, { report, store }) => {
  report('read scores', 0);
  const range = supportRange(tables, support);
  const columns = componentNames(components).map((name) => store().readNumbers(componentTableId, name, range));
  const sweep = sweepGroups({ columns, kFrom, kTo, seed, onProgress: (share) => report('try numbers of groups', share) });
  return { kFrom, kTo, rows: sweep.rows.map(({ k, inertia, silhouette, calinskiHarabasz, daviesBouldin }) => ({ k, inertia, silhouette, calinskiHarabasz, daviesBouldin })), silhouetteRows: sweep.silhouetteRows, suggestedK: sweep.suggestedK, suggestion: sweep.suggestion };
});
