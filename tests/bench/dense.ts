import { fitComponents } from '#kernels/components/components.ts';
import { scoreComponents } from '#kernels/components/scores.ts';
import { centredLogRatio } from '#kernels/compositions/centred-log-ratio.ts';
import { sortedAscending } from '#kernels/statistics/sort-ascending.ts';
import { pythonPeer, writeColumns } from './peers/peers.ts';
import type { Bench } from './bench.ts';
import { lognormalParts } from './synthetic.ts';

const N_ROWS = 1_000_000;
const N_PARTS = 48;
const N_SCORES = 8;
const TABLE_BYTES = 8 * N_ROWS * N_PARTS;

function againstNumpy(work: string, workload: string, goal: string, bytes: number, ours: (columns: Float64Array[]) => void): Bench {
  const columns = lognormalParts(N_ROWS, N_PARTS);
  const { file, remove } = writeColumns(columns);
  const numpy = pythonPeer('numpy');
  return {
    workload: `${workload}, ${N_ROWS} × ${N_PARTS} (goal ${goal})`,
    peerName: 'numpy, one thread',
    bytes,
    ours: () => ours(columns),
    peer: async () => (numpy ? (await numpy.run({ work, file, columns: N_PARTS, scores: N_SCORES })).ms : null),
    close: () => {
      numpy?.close();
      remove();
    },
  };
}

export const clrBench = (): Bench => {
  const [rows, kept] = [new Float64Array(N_ROWS * N_PARTS), new Float64Array(N_ROWS * N_PARTS)];
  let isFilled = false;
  return againstNumpy('clr', 'clr into a kept array', 'ratio ≤ 0.5', 2 * TABLE_BYTES, (columns) => {
    if (!isFilled) for (const [part, column] of columns.entries()) for (let row = 0; row < N_ROWS; row++) rows[row * N_PARTS + part] = column[row] ?? NaN;
    isFilled = true;
    centredLogRatio(rows, N_PARTS, kept);
  });
};

export const componentsNumpyBench = (): Bench =>
  againstNumpy('components', `clr + PCA + ${N_SCORES} scores`, 'ratio ≤ 1', 2 * TABLE_BYTES, (columns) => {
    scoreComponents(columns, fitComponents(columns), N_SCORES);
  });

export const sortBench = (): Bench =>
  againstNumpy('sort', 'sort of every column', 'ratio ≤ 1', 2 * TABLE_BYTES, (columns) => {
    for (const column of columns) sortedAscending(column);
  });
