import { PCA } from 'ml-pca';
import { fitComponents } from '#kernels/components/components.ts';
import { scoreComponents } from '#kernels/components/scores.ts';
import type { Bench } from './bench.ts';
import { lognormalParts } from './synthetic.ts';

const N_ROWS = 1_000_000;
const N_PARTS = 48;
const N_SCORES = 8;
/** The package works on arrays of arrays: what a plain user can hold, scaled up in the table's words. */
const PEER_ROWS = 20_000;

/** clr, PCA and eight scores of a million intervals by 48 analytes, against the package as a plain user calls it. */
export function componentsBench(): Bench {
  const columns = lognormalParts(N_ROWS, N_PARTS);
  const logs = Array.from({ length: PEER_ROWS }, (_, row) => {
    const values = columns.map((column) => Math.log(column[row] ?? 1));
    const mean = values.reduce((sum, value) => sum + value, 0) / N_PARTS;
    return values.map((value) => value - mean);
  });
  return {
    workload: `clr + PCA + ${N_SCORES} scores, ${N_ROWS} × ${N_PARTS}`,
    peerName: `ml-pca on ${PEER_ROWS} rows of ready clr`,
    targetMs: 3_000,
    ours: () => {
      scoreComponents(columns, fitComponents(columns), N_SCORES);
    },
    peer: () => {
      new PCA(logs, { scale: false, center: true }).predict(logs, { nComponents: N_SCORES });
    },
    close: () => undefined,
  };
}
