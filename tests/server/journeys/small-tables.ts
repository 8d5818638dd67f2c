import { seededRandom } from '#kernels/random.ts';
import type { TableFile } from './http-client.ts';

const ANALYTES = ['Al', 'Fe', 'Mg', 'Ca', 'Cu', 'Zn'];
/** Median ppm of three made-up rocks, one row each, by `ANALYTES`. */
const ROCKS = [
  [80000, 30000, 9000, 20000, 60, 90],
  [60000, 90000, 40000, 5000, 4000, 300],
  [20000, 200000, 6000, 1500, 900, 30000],
];
const HOLES = ['TH-1', 'TH-2', 'TH-3', 'TH-4'];
const INTERVALS = 30;
const LENGTH_M = 2;

/** Collars, surveys and assays of four made-up holes through three rocks, ten intervals of each a hole. */
export function smallTables(seed = 1): TableFile[] {
  const random = seededRandom(seed);
  const collars = HOLES.map((hole, i) => `${hole},${1000 + 50 * i},2000,300,${INTERVALS * LENGTH_M}`);
  const surveys = HOLES.flatMap((hole) => [`${hole},0,90,-60`, `${hole},30,91,-59`]);
  const assays = HOLES.flatMap((hole) =>
    Array.from({ length: INTERVALS }, (_, i) => {
      const medians = ROCKS[Math.floor((i * ROCKS.length) / INTERVALS)] ?? [];
      const grades = medians.map((median) => (median * Math.exp(0.15 * random.normal())).toFixed(1));
      return [hole, i * LENGTH_M, (i + 1) * LENGTH_M, ...grades].join(',');
    }),
  );
  const file = (name: string, header: string, rows: readonly string[]): TableFile => ({ name, content: `${[header, ...rows].join('\n')}\n` });
  return [
    file('collar.csv', 'HoleID,Easting,Northing,Elevation,Length', collars),
    file('survey.csv', 'HoleID,Depth,Azimuth,Dip', surveys),
    file('assays.csv', `HoleID,From,To,${ANALYTES.map((analyte) => `${analyte}_ppm`).join(',')}`, assays),
  ];
}
export const SMALL_ROWS = HOLES.length * INTERVALS;
