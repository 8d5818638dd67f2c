import { fastMcd, mahalanobis, type RobustScatter } from '#kernels/components/mcd.ts';
import { subsetMoments } from '#kernels/components/mcd-steps.ts';
import type { ReferenceCheck, ReferenceSet } from '#tests/support/reference.ts';
import { dataKey, inputNumber, remembered, type Adapter, type Adapters } from '../adapter.ts';
import type { ReferenceResult } from '../compare.ts';
import { reported, rowsOfColumns, rowsOfTable, transformedColumns } from '../transform.ts';

/** Random starts enough for the best subset of tables of this size. */
const STARTS = 1000;

const fits = remembered<RobustScatter>();

function points(set: ReferenceSet, check: ReferenceCheck) {
  const columns = transformedColumns(set, check);
  return { points: Float64Array.from(rowsOfColumns(columns).flat()), p: columns.length };
}

const ofScatter =
  (pick: (scatter: RobustScatter) => ReferenceResult): Adapter =>
  (set, check) => {
    const share = inputNumber(check, 'alpha');
    const scatter = fits(`${dataKey(set, check)} ${share}`, () => {
      const { points: rows, p } = points(set, check);
      return fastMcd(rows, p, { seed: 7, share, starts: STARTS });
    });
    return pick(scatter);
  };

/** Minimum covariance determinant, and classical distances beside it. */
export const ROBUST: Adapters = {
  mcd_h: ofScatter(({ subset }) => subset.length),
  mcd_logdet: ofScatter(({ raw }) => raw.logDeterminant),
  mcd_subset: ofScatter(({ subset }) => Array.from(subset, (row) => row + 1)),
  mcd_raw_center: ofScatter(({ raw }) => raw.centre),
  mcd_raw_cov_uncorrected: ofScatter(({ raw, nCols }) => rowsOfTable(raw.covariance, nCols)),
  mcd_raw_factors: ofScatter(({ raw, consistency, smallSample }) => ({
    raw: [raw.consistency, raw.smallSample],
    reweighted: [consistency, smallSample],
  })),
  mcd_center: ofScatter(({ centre }) => centre),
  mcd_cov: ofScatter(({ covariance, nCols }) => rowsOfTable(covariance, nCols)),
  mcd_outlier_count: ofScatter(({ nOutliers }) => nOutliers),
  mahalanobis_classical: (set, check) => {
    const table = points(set, check);
    const every = Uint32Array.from({ length: table.points.length / table.p }, (_, row) => row);
    const { centre, covariance } = subsetMoments(table, every);
    return reported(check, [...mahalanobis(table.points, table.p, centre, covariance)]);
  },
};
