import { dbscan, type Dbscan } from '#kernels/clustering/dbscan.ts';
import type { ReferenceCheck, ReferenceSet } from '#tests/support/reference.ts';
import { dataKey, inputNumber, remembered, type Adapters } from '../adapter.ts';
import { transformedColumns } from '../transform.ts';

const fits = remembered<Dbscan>();

function fit(set: ReferenceSet, check: ReferenceCheck): Dbscan {
  const [eps, minPts] = [inputNumber(check, 'eps'), inputNumber(check, 'minPts')];
  const minPoints = check.inputs['minPts_counts_self'] === false ? minPts + 1 : minPts;
  return fits(`${dataKey(set, check)} ${eps} ${minPoints}`, () =>
    dbscan({ columns: transformedColumns(set, check), eps, minPoints }),
  );
}

/** Groups of connected dense rows. */
export const DBSCAN: Adapters = {
  dbscan_labels: (set, check) => fit(set, check).labels,
  dbscan_core_mask: (set, check) => fit(set, check).core,
  dbscan_counts: (set, check) => {
    const { clusters, nNoise, nCore } = fit(set, check);
    return { clusters, noise: nNoise, core: nCore };
  },
};
