import { adjustedRandIndex, crosstabLabels } from '#kernels/clustering/agreement.ts';
import { logErrorSd } from '#kernels/clustering/assay-error.ts';
import { averageLinkage } from '#kernels/clustering/average-linkage.ts';
import {
  chainMarginals,
  likeliestChain,
  logTransitions,
} from '#kernels/clustering/chain-smoothing.ts';
import { changePoints, labelSegments } from '#kernels/clustering/change-points.ts';
import { consensus } from '#kernels/clustering/consensus.ts';
import { contiguity, transitionStatistics } from '#kernels/clustering/contiguity.ts';
import { cutTree } from '#kernels/clustering/cut-tree.ts';
import { dbscan } from '#kernels/clustering/dbscan.ts';
import { downHoleSequences } from '#kernels/clustering/down-hole-sequences.ts';
import { fingerprints } from '#kernels/clustering/fingerprints.ts';
import { gapStatistic } from '#kernels/clustering/gap-statistic.ts';
import { gaussianMixture } from '#kernels/clustering/gaussian-mixture.ts';
import { hdbscan } from '#kernels/clustering/hdbscan.ts';
import { hierarchicalGroups } from '#kernels/clustering/hierarchical-groups.ts';
import { hierarchicalTree } from '#kernels/clustering/hierarchical.ts';
import { kMeans } from '#kernels/clustering/k-means.ts';
import { membershipUnderError } from '#kernels/clustering/membership-under-error.ts';
import { allMemberships, ownMembership, withinVariance } from '#kernels/clustering/membership.ts';
import { mixtureMembership } from '#kernels/clustering/mixture-membership.ts';
import { COVARIANCE_FAMILIES } from '#kernels/clustering/mixture-model.ts';
import { sweepMixtures } from '#kernels/clustering/mixture-sweep.ts';
import { changedShare, modeFilter } from '#kernels/clustering/mode-filter.ts';
import { silhouette } from '#kernels/clustering/silhouette.ts';
import { strengthForRun } from '#kernels/clustering/smoothing-strength.ts';
import { bootstrapStability, type Regroup } from '#kernels/clustering/stability.ts';
import { sweepGroups } from '#kernels/clustering/sweep.ts';
import { groupValidity } from '#kernels/clustering/validity.ts';
import { codesOf, metresOf, testHostileInputs } from '#tests/support/hostile-inputs.ts';

const each = (of: (value: number) => unknown) => (values: Float64Array) =>
  Array.from(values, (value) => of(value));
/** Groups 1 to 3 in turn. */
const labels = (column: Float64Array) =>
  Uint16Array.from(codesOf(column, 3).codes, (code) => code + 1);
const oneHole = (column: Float64Array) => new Int32Array(column.length);
const thin = (fromM: Float64Array) => {
  const tops = fromM.toSorted();
  return { fromM: tops, toM: tops.map((top) => top + 0.001) };
};
const seeded = { seed: 1, restarts: 2 };
/** Memberships of two groups, a row of a column each. */
const chain = (column: Float64Array) => ({
  membership: Float64Array.from([...column].flatMap((x) => [x / 7, 1 - x / 7])),
  k: 2,
  sequence: oneHole(column),
  ...metresOf(column),
  beta: 1,
  fadeM: 2,
});
const squareOf = (column: Float64Array) =>
  Float64Array.from({ length: 16 }, (_, at) => {
    const [row, col] = [at >> 2, at & 3];
    return row === col ? 0 : (column[Math.min(row, col) + Math.max(row, col)] ?? NaN);
  });

/** A hole of every ten rows. */
const tens = ({ length }: Float64Array) =>
  Int32Array.from({ length }, (_, i) => Math.floor(i / 10));
const halve =
  (column: Float64Array): Regroup =>
  (rows) =>
    kMeans({ columns: [Float64Array.from(rows, (row) => column[row]!)], k: 2, ...seeded }).labels;

testHostileInputs([
  ['crosstabLabels', (weights) => crosstabLabels(labels(weights), labels(weights), weights)],
  ['logErrorSd', each((x) => logErrorSd(x, { s0: 0.1, k: 0.05 }))],
  ['logErrorSd, error', each((s0) => logErrorSd(5, { s0, k: s0 }))],
  ['averageLinkage', (distances) => averageLinkage(squareOf(distances), 4)],
  ['likeliestChain', (x) => likeliestChain(chain(x))],
  [
    'likeliestChain, depths',
    (fromM) => likeliestChain({ ...chain(metresOf(fromM).toM.fill(3)), ...thin(fromM) }),
  ],
  ['likeliestChain, beta', (v) => Array.from(v, (beta) => likeliestChain({ ...chain(v), beta }))],
  ['chainMarginals', (x) => chainMarginals(chain(x)), 'missing'],
  ['logTransitions', (counts) => logTransitions(counts.slice(0, 4), 2)],
  ['strengthForRun', (x) => strengthForRun(chain(x), 3)],
  ['changePoints', (x, y) => changePoints({ columns: [x, y], sequence: oneHole(x) })],
  ['labelSegments', (x, c) => labelSegments([x], oneHole(x), c.slice(0, 2))],
  [
    'contiguity',
    (lengthM) => contiguity({ labels: labels(lengthM), sequence: oneHole(lengthM), lengthM }),
  ],
  ['transitionStatistics', (counts) => transitionStatistics(counts.slice(0, 9), 3)],
  ['dbscan', (x, y) => dbscan({ columns: [x, y], eps: 1, minPoints: 3 })],
  ['dbscan, radius', (v) => Array.from(v, (eps) => dbscan({ columns: [v], eps, minPoints: 3 }))],
  ['downHoleSequences', (fromM) => downHoleSequences({ hole: oneHole(fromM), ...thin(fromM) })],
  ['fingerprints', (x, y, weights) => fingerprints([x, y], labels(x), weights), 'missing'],
  ['gapStatistic', (x, y) => gapStatistic({ columns: [x, y], kTo: 3, ...seeded, references: 2 })],
  ...COVARIANCE_FAMILIES.map(
    (family) =>
      [
        `gaussianMixture, ${family}`,
        (x: Float64Array, y: Float64Array) =>
          gaussianMixture({
            columns: [x, y],
            k: 2,
            family,
            seed: 1,
            starts: 2,
            rowsPerParameter: 2,
          }),
        'missing',
      ] as const,
  ),
  [
    'gaussianMixture, weighted',
    (x, weights) =>
      gaussianMixture({
        ...{ columns: [x], k: 2, family: 'full', seed: 1, starts: 2, rowsPerParameter: 2, weights },
      }),
    'missing',
  ],
  [
    'sweepMixtures',
    (x, y) => sweepMixtures({ columns: [x, y], seed: 1, starts: 2, kTo: 3, rowsPerParameter: 2 }),
    'missing',
  ],
  [
    'mixtureMembership',
    (x) =>
      mixtureMembership(
        {
          ...{ family: 'full', k: 2, p: 1, shares: Float64Array.of(0.4, 0.6) },
          ...{ means: Float64Array.of(2, 5), covariances: Float64Array.of(1, 2) },
        },
        [x],
      ),
    'missing',
  ],
  ['hdbscan', (x, y) => hdbscan({ columns: [x, y], minClusterSize: 5 }), 'missing'],
  ...(['ward', 'average', 'complete'] as const).map(
    (linkage) =>
      [
        `hierarchicalTree, ${linkage}`,
        (x: Float64Array, y: Float64Array) => hierarchicalTree({ columns: [x, y], linkage }),
      ] as const,
  ),
  [
    'hierarchicalGroups',
    (x, y) => hierarchicalGroups({ columns: [x, y], linkage: 'ward', k: 3, seed: 1 }),
  ],
  ['kMeans', (x, y) => kMeans({ columns: [x, y], k: 3, ...seeded })],
  ['kMeans, weighted', (x, weights) => kMeans({ columns: [x], k: 3, ...seeded, weights })],
  ['sweepGroups', (x, y) => sweepGroups({ columns: [x, y], kFrom: 1, kTo: 3, ...seeded })],
  [
    'membershipUnderError',
    (x, limits) =>
      membershipUnderError({
        parts: [
          {
            values: x,
            limits: limits.map((limit, i) => (i % 5 === 4 ? limit : NaN)),
            error: { s0: 0.1, k: 0.05 },
            lognormal: { mean: 1, sd: 0.5 },
          },
        ],
        assign: ([values]) => Uint8Array.from(values ?? [], (value) => (value > 3 ? 1 : 2)),
        k: 2,
        lengthM: new Float64Array(x.length).fill(1),
        seed: 1,
        draws: 20,
      }),
    'missing',
  ],
  ['withinVariance', each((inertia) => withinVariance(inertia, 40, 3, 2))],
  [
    'ownMembership',
    (x, centroids) =>
      ownMembership({ columns: [x], centroids: centroids.slice(0, 2), variance: 1 }),
    'missing',
  ],
  [
    'allMemberships',
    (x) => allMemberships({ columns: [x], centroids: Float64Array.of(2, 5), variance: x[0] ?? 1 }),
    'missing',
  ],
  [
    'modeFilter',
    (lengthM) => modeFilter({ labels: labels(lengthM), sequence: oneHole(lengthM), lengthM }),
  ],
  ['silhouette', (x, y) => silhouette([x, y], labels(x)), 'missing'],
  ['groupValidity', (x, y) => groupValidity([x, y], labels(x))],
  ['adjustedRandIndex', (a) => adjustedRandIndex(a.map(Math.round), labels(a))],
  ['changedShare', (a) => changedShare(a.map(Math.round), labels(a))],
  [
    'bootstrapStability',
    (x) =>
      bootstrapStability({
        labels: labels(x),
        hole: tens(x),
        regroup: halve(x),
        seed: 1,
        resamples: 5,
      }),
  ],
  [
    'consensus',
    (x) => consensus({ hole: tens(x), regroup: halve(x), seed: 1, resamples: 5 }),
    'missing',
  ],
  [
    'cutTree',
    (x, weights) => cutTree(hierarchicalTree({ columns: [x], linkage: 'average' }), 3, weights),
  ],
]);
