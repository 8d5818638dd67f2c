import { Piscina } from 'piscina';
import { componentsOfMoments } from '#kernels/components/components.ts';
import { combineLogMoments, type LogMoments } from '#kernels/components/log-moments.ts';
import type { Bench } from './bench.ts';
import type { SpanWork } from './span-worker.ts';
import { lognormalParts } from './synthetic.ts';

const N_ROWS = 1_000_000;
const N_PARTS = 48;
const N_SCORES = 8;

/** Components and scores by two threads that share the columns, against the same by one of them. */
export function threadsBench(): Bench {
  const columns = lognormalParts(N_ROWS, N_PARTS);
  const out = Array.from({ length: N_SCORES }, () => new Float64Array(new SharedArrayBuffer(8 * N_ROWS)));
  const filename = new URL('span-worker.ts', import.meta.url).href;
  const pool = new Piscina<SpanWork>({
    execArgv: ['--import', import.meta.resolve('tsx')],
    minThreads: 2,
    maxThreads: 2,
  });
  const shared = async <T>(name: string, threads: number, more: object = {}): Promise<T[]> =>
    Promise.all(Array.from({ length: threads }, (_, thread) => pool.run({ columns, thread, threads, ...more }, { filename, name })));
  const sums: number[] = [];
  const work = async (threads: number): Promise<void> => {
    const parts = (await shared<{ span: number; moments: LogMoments }[]>('moments', threads)).flat();
    const inOrder = parts.sort((a, b) => a.span - b.span).map(({ moments }) => moments);
    const components = componentsOfMoments(combineLogMoments(N_PARTS, inOrder));
    await shared('scores', threads, { components, out });
    sums[threads] = out.reduce((sum, score) => sum + score[N_ROWS - 1]!, 0);
  };
  return {
    workload: `clr + PCA + ${N_SCORES} scores, ${N_ROWS} × ${N_PARTS}, two threads (goal ratio ≤ 0.59)`,
    peerName: 'one of the threads',
    ours: () => work(2),
    peer: () => work(1),
    figures: () => (sums[1] === sums[2] ? 'the same bits by one thread and by two' : 'the answers DIFFER'),
    close: () => pool.destroy(),
  };
}
