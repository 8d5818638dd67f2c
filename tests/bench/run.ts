import { columnStoreBench } from './column-store.ts';
import { componentsBench } from './components.ts';
import { groupsBench } from './groups.ts';
import { importBench } from './import.ts';

/** One workload, done by ours and by a peer that does the same or the least that must be done. */
export interface Bench {
  workload: string;
  peerName: string;
  /** Time aimed at on a quiet machine of two cores, if there is one; the fastest run is held against it. */
  targetMs?: number;
  ours: () => void | Promise<void>;
  peer: () => void | Promise<void>;
  close: () => void | Promise<void>;
}

/** Every bench of the project: a file adds its maker here. */
const BENCHES: readonly (() => Bench | Promise<Bench>)[] = [columnStoreBench, componentsBench, groupsBench, importBench];

const RUNS = 5;

const median = (sorted: readonly number[]): number => sorted[Math.floor(sorted.length / 2)] ?? NaN;

async function timeMs(work: () => void | Promise<void>): Promise<number> {
  const startedAt = performance.now();
  await work();
  return performance.now() - startedAt;
}

/** One round unmeasured, then ours and peer in turn, so that a busy moment falls on both. */
async function measure({ ours, peer }: Bench) {
  const rounds: { ours: number; peer: number }[] = [];
  for (let round = -1; round < RUNS; round++) {
    const times = { ours: await timeMs(ours), peer: await timeMs(peer) };
    if (round >= 0) rounds.push(times);
  }
  const sorted = (who: 'ours' | 'peer') => rounds.map((times) => times[who]).sort((a, b) => a - b);
  return { ours: median(sorted('ours')), peer: median(sorted('peer')), fastest: sorted('ours')[0] ?? NaN };
}

const asMs = (ms: number): string => `${ms.toFixed(1)} ms`;

function targetWords(targetMs: number | undefined, fastestMs: number): string {
  if (targetMs === undefined) return '';
  return `${asMs(targetMs)} ${fastestMs <= targetMs ? 'met' : 'missed'} (fastest ${asMs(fastestMs)})`;
}

// `npm run bench -- columns` runs those whose workload holds the word.
const wanted = process.argv[2] ?? '';
const rows: Record<string, string>[] = [];
for (const make of BENCHES) {
  const bench = await make();
  try {
    if (!bench.workload.includes(wanted)) continue;
    const { ours, peer, fastest } = await measure(bench);
    const target = targetWords(bench.targetMs, fastest);
    const ratio = (ours / peer).toFixed(2);
    rows.push({ workload: bench.workload, ours: asMs(ours), peer: `${asMs(peer)} (${bench.peerName})`, ratio, target });
  } finally {
    await bench.close();
  }
}
console.table(rows);
