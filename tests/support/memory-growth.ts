import { gaussianMixture } from '#kernels/clustering/gaussian-mixture.ts';
import { kMeans } from '#kernels/clustering/k-means.ts';
import { sweepGroups } from '#kernels/clustering/sweep.ts';
import { fitComponents } from '#kernels/components/components.ts';
import { scoreComponents } from '#kernels/components/scores.ts';
import { seededRandom } from '#kernels/random.ts';

/**
 * Run as a process of its own with the name of a kernel: prints how many times the size of its matrix
 * the process grew at most while the kernel ran, results included.
 */
const random = seededRandom(3);
const table = (rows: number, columns: number): Float64Array[] =>
  Array.from({ length: columns }, () =>
    Float64Array.from({ length: rows }, () => 1 + Math.floor(4 * random.uniform()) + random.uniform()),
  );

interface Work {
  columns: Float64Array[];
  run: (columns: Float64Array[]) => void;
}

const WORKS: Record<string, Work> = {
  components: { columns: table(300_000, 40), run: (columns) => scoreComponents(columns, fitComponents(columns), 8) },
  'k-means': { columns: table(1_000_000, 8), run: (columns) => kMeans({ columns, k: 4, seed: 1, restarts: 3 }) },
  sweep: { columns: table(1_000_000, 8), run: (columns) => sweepGroups({ columns, kFrom: 2, kTo: 3, seed: 1, restarts: 2 }) },
  mixture: {
    columns: table(1_000_000, 8),
    run: (columns) => gaussianMixture({ columns, k: 3, family: 'full', seed: 1, starts: 1, maxSteps: 3 }),
  },
};

const work = WORKS[process.argv[2] ?? ''];
if (!work) throw new Error(`expected one of ${Object.keys(WORKS).join(', ')}`);
const [kib, matrix] = [1024, 8 * work.columns.length * (work.columns[0]?.length ?? 0)];
// Once on a few rows: the code and its room are there before anything is counted.
work.run(work.columns.map((column) => column.slice(0, 20_000)));
const before = process.resourceUsage().maxRSS * kib;
work.run(work.columns);
console.log((process.resourceUsage().maxRSS * kib - before) / matrix);
