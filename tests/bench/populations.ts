import { dipStatistic } from '#kernels/populations/dip.ts';
import { fitLognormalMixtures } from '#kernels/populations/lognormal-mixture.ts';
import { mixtureData } from '#kernels/populations/mixture-data.ts';
import { dipByR, writeColumns } from './peers/peers.ts';
import type { Bench } from './bench.ts';
import { lognormalParts } from './synthetic.ts';

const N_COLUMNS = 48;
const DIP_ROWS = 100_000;
const MIXTURE_ROWS = 10_000;

export function dipBench(): Bench {
  const columns = lognormalParts(DIP_ROWS, N_COLUMNS);
  const { file, remove } = writeColumns(columns);
  return {
    workload: `dip of ${N_COLUMNS} columns of ${DIP_ROWS} (goal ratio ≤ 1)`,
    peerName: 'R diptest',
    bytes: 8 * DIP_ROWS * N_COLUMNS,
    ours: () => {
      for (const column of columns) dipStatistic(column);
    },
    peer: () => dipByR(file, N_COLUMNS),
    close: remove,
  };
}

/** No peer does the same: the machine's own work of reading the columns stands in. */
export function mixturesBench(): Bench {
  const columns = lognormalParts(MIXTURE_ROWS, N_COLUMNS);
  return {
    workload: `1 to 4 lognormal populations of ${N_COLUMNS} columns of ${MIXTURE_ROWS}`,
    peerName: 'none',
    targetMs: 2_000,
    bytes: 8 * MIXTURE_ROWS * N_COLUMNS,
    ours: () => {
      for (const column of columns) fitLognormalMixtures(mixtureData(column.map(Math.log)));
    },
    peer: () => null,
    close: () => undefined,
  };
}
