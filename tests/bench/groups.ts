import { kmeans } from 'ml-kmeans';
import { kMeans } from '#kernels/clustering/k-means.ts';
import { seededRandom } from '#kernels/random.ts';
import type { Bench } from './run.ts';

const N_ROWS = 1_000_000;
const N_COLUMNS = 8;
const K = 6;
/** The package holds a row as an array: a twentieth of the rows, one start. */
const PEER_ROWS = 50_000;

function blobs(): Float64Array[] {
  const random = seededRandom(11);
  const centres = Array.from({ length: K }, () => Array.from({ length: N_COLUMNS }, () => 4 * random.normal()));
  const columns = Array.from({ length: N_COLUMNS }, () => new Float64Array(new SharedArrayBuffer(8 * N_ROWS)));
  for (let row = 0; row < N_ROWS; row++) {
    const centre = centres[random.below(K)] ?? [];
    columns.forEach((column, i) => (column[row] = (centre[i] ?? 0) + random.uniform() + random.uniform() + random.uniform()));
  }
  return columns;
}

/** k-means of a million intervals by eight components, against the package as a plain user calls it. */
export function groupsBench(): Bench {
  const columns = blobs();
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
