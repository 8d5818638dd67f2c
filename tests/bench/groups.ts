import { kmeans } from 'ml-kmeans';
import { kMeans } from '#kernels/clustering/k-means.ts';
import type { Bench } from './bench.ts';
import { clouds } from './synthetic.ts';

const N_ROWS = 1_000_000;
const N_COLUMNS = 8;
const K = 6;
/** The package holds a row as an array: a twentieth of the rows, one start. */
const PEER_ROWS = 50_000;

/** k-means of a million intervals by eight components, against the package as a plain user calls it. */
export function groupsBench(): Bench {
  const columns = clouds(N_ROWS, N_COLUMNS, K);
  const rows = Array.from({ length: PEER_ROWS }, (_, row) => columns.map((column) => column[row] ?? 0));
  return {
    workload: `k-means k = ${K}, ${N_ROWS} × ${N_COLUMNS}`,
    peerName: `ml-kmeans, one start on ${PEER_ROWS} rows`,
    targetMs: 1_000,
    ours: () => {
      kMeans({ columns, k: K, seed: 1 });
    },
    peer: () => {
      kmeans(rows, K, { seed: 1, initialization: 'kmeans++' });
    },
    close: () => undefined,
  };
}
