import type { HoleTrace, SectionPlane } from '../charts/hole-geometry.ts';

/** A fence of holes drilled about one vertical plane along the grid. */
export interface SectionLine {
  plane: SectionPlane;
  /** Grid coordinate the plane stands at. */
  atM: number;
  /** Letter of that coordinate. */
  letter: 'E' | 'N';
  holes: readonly string[];
}

interface Reach {
  name: string;
  middle: { east: number; north: number };
  run: { east: number; north: number };
}

function reachOf({ name, points }: HoleTrace): Reach | null {
  const [head, tail] = [points[0], points.at(-1)];
  if (head === undefined || tail === undefined) return null;
  return {
    name,
    middle: { east: (head.east + tail.east) / 2, north: (head.north + tail.north) / 2 },
    run: { east: Math.abs(tail.east - head.east), north: Math.abs(tail.north - head.north) },
  };
}

const LEAST_HALF_M = 5;
const UPRIGHT_M = 2;

/**
 * Finds the sections a deposit was drilled on: planes along the grid that hold the holes, in order of
 * their coordinate. They run east–west where most holes do (or where holes are upright and lie
 * wider to the east), else north–south. The corridor is half the usual gap between fences.
 */
export function sectionLines(traces: readonly HoleTrace[]): SectionLine[] {
  const reaches = traces.flatMap((trace) => reachOf(trace) ?? []);
  if (reaches.length === 0) return [];
  const runsEast = isEastWest(reaches);
  const across = ({ middle }: Reach) => (runsEast ? middle.north : middle.east);
  const sorted = [...reaches].sort((a, b) => across(a) - across(b));
  const fences = parted(sorted.map((reach) => ({ name: reach.name, at: across(reach) })));
  const middles = fences.map((fence) => fence.reduce((sum, { at }) => sum + at, 0) / fence.length);
  const halfWidthM = halfGap(middles);
  const along = reaches.reduce((sum, { middle }) => sum + (runsEast ? middle.east : middle.north), 0) / reaches.length;
  return fences.map((fence, index): SectionLine => {
    const atM = Math.round(middles[index] ?? 0);
    const plane = runsEast ? { east: along, north: atM, azimuthDeg: 90, halfWidthM } : { east: atM, north: along, azimuthDeg: 0, halfWidthM };
    return { plane, atM, letter: runsEast ? 'N' : 'E', holes: fence.map(({ name }) => name) };
  });
}

function isEastWest(reaches: readonly Reach[]): boolean {
  const [east, north] = [reaches.reduce((sum, { run }) => sum + run.east, 0), reaches.reduce((sum, { run }) => sum + run.north, 0)];
  if (east + north > reaches.length * UPRIGHT_M) return east >= north;
  const span = (values: number[]) => Math.max(...values) - Math.min(...values);
  return span(reaches.map(({ middle }) => middle.east)) >= span(reaches.map(({ middle }) => middle.north));
}

interface Placed {
  name: string;
  at: number;
}

/** Parts sorted places at gaps that stand out: over a third of the widest gap. */
function parted(sorted: readonly Placed[]): Placed[][] {
  const gaps = sorted.slice(1).map(({ at }, index) => at - (sorted[index]?.at ?? at));
  const least = Math.max(LEAST_HALF_M, ...gaps) / 3;
  const fences: Placed[][] = [];
  let before: number | null = null;
  for (const place of sorted) {
    const fence = fences.at(-1);
    if (fence === undefined || before === null || place.at - before > least) fences.push([place]);
    else fence.push(place);
    before = place.at;
  }
  return fences;
}

function halfGap(middles: readonly number[]): number {
  const gaps = middles.slice(1).map((at, index) => at - (middles[index] ?? at)).sort((a, b) => a - b);
  const usual = gaps[Math.floor(gaps.length / 2)] ?? 50;
  return Math.max(LEAST_HALF_M, Math.round(usual / 2));
}

/** The fence with most holes; the first of equals. */
export function usualLine(lines: readonly SectionLine[]): number {
  let best = 0;
  lines.forEach((line, index) => {
    if (line.holes.length > (lines[best]?.holes.length ?? 0)) best = index;
  });
  return best;
}
