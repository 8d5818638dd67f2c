import { copyBandwidth, measure, type Bench } from './bench.ts';
import { columnStoreBench } from './column-store.ts';
import { componentsBench } from './components.ts';
import { clrBench, componentsNumpyBench, sortBench } from './dense.ts';
import { kMeansScikitBench, mixtureScikitBench, silhouetteScikitBench, sweepScikitBench } from './grouping.ts';
import { groupsBench } from './groups.ts';
import { importBench } from './import.ts';
import { importDelayBench } from './import-delay.ts';
import { dipBench, mixturesBench } from './populations.ts';
import { threadsBench } from './threads.ts';

/** Every bench of the project by name: a file adds its maker here. */
const BENCHES: Readonly<Record<string, () => Bench | Promise<Bench>>> = {
  'column-store': columnStoreBench,
  threads: threadsBench,
  'components-package': componentsBench,
  'components-numpy': componentsNumpyBench,
  clr: clrBench,
  sort: sortBench,
  'groups-package': groupsBench,
  'groups-scikit': kMeansScikitBench,
  sweep: sweepScikitBench,
  'gaussian-mixture': mixtureScikitBench,
  silhouette: silhouetteScikitBench,
  dip: dipBench,
  mixtures: mixturesBench,
  import: importBench,
  'import-delay': importDelayBench,
};

const asMs = (ms: number): string => `${ms.toFixed(1)} ms`;

function targetWords(targetMs: number | undefined, fastestMs: number): string {
  if (targetMs === undefined) return '';
  return `${asMs(targetMs)} ${fastestMs <= targetMs ? 'met' : 'missed'} (fastest ${asMs(fastestMs)})`;
}

// `npm run bench -- groups` runs those whose name holds the word.
const wanted = process.argv[2] ?? '';
const bandwidth = copyBandwidth();
const rows: Record<string, string>[] = [];
const figures: string[] = [`memory copied at ${(bandwidth / 1e6).toFixed(1)} GB/s, read and written counted`];
for (const [name, make] of Object.entries(BENCHES)) {
  if (!name.includes(wanted)) continue;
  const bench = await make();
  try {
    const { workload, peerName, targetMs, bytes } = bench;
    const { ours, peer, ratio, fastest } = await measure(bench);
    rows.push({
      workload,
      ours: asMs(ours),
      peer: peer === null ? `– (${peerName})` : `${asMs(peer)} (${peerName})`,
      ratio: ratio === null ? '–' : ratio.toFixed(3),
      'times the memory limit': bytes === undefined ? '' : (ours / (bytes / bandwidth)).toFixed(1),
      target: targetWords(targetMs, fastest),
    });
    if (bench.figures) figures.push(`${workload}: ${bench.figures()}`);
  } finally {
    await bench.close();
  }
}
console.table(rows);
for (const line of figures) console.log(line);
