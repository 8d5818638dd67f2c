import type { TextTable } from './assay-files.ts';
import type { AssayInterval } from './assays.ts';
import type { Hole } from './holes.ts';

export type ProblemKind =
  | 'past-end-of-hole'
  | 'unknown-hole'
  | 'overlap'
  | 'text-in-number'
  | 'azimuth-out-of-range'
  | 'inverted-interval';

/** One row spoilt on purpose, so that the list of row problems has something to show. */
export interface PlantedProblem {
  fileName: string;
  /** Line of the file, the header being line 1. */
  line: number;
  kind: ProblemKind;
  /** Hole, from and to of the spoilt assay as truth knows it; null outside assays. */
  interval: { hole: string; fromM: number; toM: number } | null;
}

export interface PlantingGround {
  fileName: string;
  table: TextTable;
  intervals: readonly AssayInterval[];
}

/** Finds a sampled row by rule from a start index; a scenario without one is a bug. */
function findRow(
  { intervals, fileName }: PlantingGround,
  start: number,
  fits: (i: number) => boolean,
): number {
  for (let i = start; i < intervals.length; i++) if (intervals[i]?.grades && fits(i)) return i;
  throw new RangeError(
    `expected a row fit for a planted problem in ${fileName} after row ${start}, found none`,
  );
}

function spoil(
  ground: PlantingGround,
  index: number,
  kind: ProblemKind,
  column: number,
  text: string,
): PlantedProblem {
  const interval = ground.intervals[index];
  const row = ground.table.rows[index];
  if (!interval || !row)
    throw new RangeError(`expected row ${index} in ${ground.fileName}, found none`);
  row[column] = text;
  const { hole, fromM, toM } = interval;
  return { fileName: ground.fileName, line: index + 2, kind, interval: { hole, fromM, toM } };
}

/** Four spoilt assay rows; changes the two tables in place. */
export function plantAssayProblems(older: PlantingGround, newer: PlantingGround): PlantedProblem[] {
  const isLast = ({ intervals }: PlantingGround, i: number): boolean =>
    intervals[i]?.hole !== intervals[i + 1]?.hole;
  const followsSame = ({ intervals }: PlantingGround, i: number): boolean =>
    intervals[i - 1]?.hole === intervals[i]?.hole && intervals[i - 1]?.grades !== null;

  const last = findRow(older, 600, (i) => isLast(older, i));
  const pastEnd = ((older.intervals[last]?.toM ?? 0) + 0.4).toFixed(1);
  const misspelt = findRow(older, 1500, (i) => /0[1-9]\d$/.test(older.intervals[i]?.hole ?? ''));
  const misspeltHole = (older.intervals[misspelt]?.hole ?? '').replace(/0(?=[1-9]\d$)/, 'O');
  const words = findRow(older, 2400, () => true);
  const overlap = findRow(newer, 900, (i) => followsSame(newer, i));
  const overlapFrom = ((newer.intervals[overlap]?.fromM ?? 0) - 0.5).toFixed(1);
  return [
    spoil(older, last, 'past-end-of-hole', 2, pastEnd),
    spoil(older, misspelt, 'unknown-hole', 0, misspeltHole),
    spoil(older, words, 'text-in-number', older.table.header.indexOf('Zn_ppm'), 'see note'),
    spoil(newer, overlap, 'overlap', 1, overlapFrom),
  ];
}

/** One impossible survey station and one upside-down log interval, added to the tables in place. */
export function plantOtherProblems(
  survey: TextTable,
  lithology: TextTable,
  holes: readonly Hole[],
): PlantedProblem[] {
  const hole = holes[41]?.id ?? '';
  const station = survey.rows.findIndex(([id, depth]) => id === hole && depth === '120.0') + 1;
  survey.rows.splice(station, 0, [hole, '135.0', '612.4', '-57.0']);
  const logged = lithology.rows.findIndex(([id]) => id === hole) + 2;
  const at = lithology.rows[logged]?.[1] ?? '0.0';
  lithology.rows.splice(logged, 0, [
    hole,
    at,
    (Number(at) - 0.6).toFixed(1),
    'AND',
    '2',
    'typed twice',
  ]);
  return [
    { fileName: 'survey.csv', line: station + 2, kind: 'azimuth-out-of-range', interval: null },
    { fileName: 'lithology.csv', line: logged + 2, kind: 'inverted-interval', interval: null },
  ];
}
