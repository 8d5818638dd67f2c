import { gaussianMixture } from '#kernels/clustering/gaussian-mixture.ts';
import { kMeans } from '#kernels/clustering/k-means.ts';
import { silhouette } from '#kernels/clustering/silhouette.ts';
import { sweepGroups } from '#kernels/clustering/sweep.ts';
import { pythonPeer, writeColumns } from './peers/peers.ts';
import type { Bench } from './bench.ts';
import { clouds } from './synthetic.ts';

const K = 6;
const N_COLUMNS = 8;

interface Work {
  work: string;
  workload: string;
  nRows: number;
  goal: string;
  /** Runs ours; what it reached, held beside the peer's. */
  ours: (columns: Float64Array[]) => number;
  /** What both are told beside the data. */
  request?: (columns: Float64Array[]) => Record<string, unknown>;
  /** What is reached: "inertia". */
  reached: string;
}

function againstScikit({ work, workload, nRows, goal, ours, request, reached }: Work): Bench {
  const columns = clouds(nRows, N_COLUMNS, K);
  const { file, remove } = writeColumns(columns);
  const scikit = pythonPeer('sklearn');
  const told = request?.(columns) ?? {};
  const values: { ours?: number; peer?: number | null } = {};
  return {
    workload: `${workload}, ${nRows} × ${N_COLUMNS} (goal ${goal})`,
    peerName: 'scikit-learn, one thread',
    bytes: 8 * nRows * N_COLUMNS,
    ours: () => void (values.ours = ours(columns)),
    peer: async () => {
      if (!scikit) return null;
      const { ms, value } = await scikit.run({ work, file, columns: N_COLUMNS, k: K, ...told });
      values.peer = value;
      return ms;
    },
    figures: () => `${reached} ${values.ours?.toPrecision(9)}, scikit-learn ${values.peer?.toPrecision(9) ?? 'not installed'}`,
    close: () => {
      scikit?.close();
      remove();
    },
  };
}

export const kMeansScikitBench = (): Bench =>
  againstScikit({ work: 'kmeans', workload: `k-means k = ${K}`, nRows: 1_000_000, goal: 'ratio ≤ 0.04', reached: 'inertia', ours: (columns) => kMeans({ columns, k: K, seed: 1 }).inertia });

export const sweepScikitBench = (): Bench =>
  againstScikit({
    work: 'sweep', workload: 'k-means k = 2 to 12, 10 starts', nRows: 10_000, goal: 'ratio ≤ 0.5', reached: 'sum of inertias',
    ours: (columns) => sweepGroups({ columns, kFrom: 2, kTo: 12, restarts: 10, silhouetteRows: 500, seed: 1 }).rows.reduce((sum, { inertia }) => sum + inertia, 0),
  });

export const mixtureScikitBench = (): Bench =>
  againstScikit({
    work: 'mixture', workload: `Gaussian mixture k = ${K}, full`, nRows: 1_000_000, goal: 'ratio ≤ 0.33', reached: 'ln L',
    // The default tolerance goes on to a likelihood the peer never sees; this one still ends above the peer's.
    ours: (columns) => gaussianMixture({ columns, k: K, family: 'full', seed: 1, starts: 1, tolerance: 1e-5 }).logLik,
  });

export const silhouetteScikitBench = (): Bench =>
  againstScikit({
    work: 'silhouette', workload: 'silhouette of all pairs', nRows: 10_000, goal: 'ratio ≤ 0.33', reached: 'mean width',
    request: (columns) => ({ labels: Array.from(kMeans({ columns, k: K, seed: 1 }).labels) }),
    ours: (columns) => silhouette(columns, kMeans({ columns, k: K, seed: 1, restarts: 1 }).labels, { sampleSize: 10_000 }).mean ?? NaN,
  });
