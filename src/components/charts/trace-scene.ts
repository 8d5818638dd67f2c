import KDBush from 'kdbush';
import { paintRuns, pointAtDepth, stretch } from './hole-geometry.ts';
import type { HoleTrace, PaintKey, TracePoint } from './hole-geometry.ts';

export type Flat = readonly [number, number];
/** A station on the page, in metres; null where it is not shown. */
export type Flatten = (point: TracePoint) => Flat | null;

/** Holes laid flat on a plan or a section, in metres: x to the right, y upwards. */
export interface Scene {
  /** Stretches by colour. */
  runs: { key: PaintKey; lines: Flat[][] }[];
  /** Whole traces, as far as they are shown. */
  traces: Flat[][];
  heads: { name: string; at: Flat }[];
  /** Middles of intervals, for the pointer. */
  middles: { rows: Int32Array; holes: string[]; places: Flat[]; tree: KDBush | null };
  extent: { low: Flat; high: Flat };
}

/** Parts of a line where every point is shown. */
function shownParts(points: readonly TracePoint[], flatten: Flatten): Flat[][] {
  const parts: Flat[][] = [[]];
  for (const point of points) {
    const at = flatten(point);
    if (at === null) parts.push([]);
    else parts.at(-1)?.push(at);
  }
  return parts.filter((part) => part.length > 1);
}

/** Stations added so that a trace is cut close to the edge of a corridor. */
function densely(points: readonly TracePoint[], stepM: number): TracePoint[] {
  const last = points.at(-1);
  if (last === undefined) return [];
  const start = points[0]?.depthM ?? 0;
  const count = Math.max(1, Math.ceil((last.depthM - start) / stepM));
  const depths = new Set([...points.map(({ depthM }) => depthM), ...Array.from({ length: count + 1 }, (_value, i) => start + ((last.depthM - start) * i) / count)]);
  return [...depths].sort((a, b) => a - b).map((depth) => pointAtDepth(points, depth));
}

export function buildScene(holes: readonly HoleTrace[], flatten: Flatten, isCut: boolean): Scene {
  const runs = new Map<PaintKey, Flat[][]>();
  const traces: Flat[][] = [];
  const heads: Scene['heads'] = [];
  const rows: number[] = [];
  const owners: string[] = [];
  const places: Flat[] = [];
  for (const { name, points, intervals } of holes) {
    if (points.length < 2) continue;
    const stations = isCut ? densely(points, 5) : points;
    const shown = shownParts(stations, flatten);
    const head = shown[0]?.[0];
    if (head === undefined) continue;
    heads.push({ name, at: head });
    traces.push(...shown);
    for (const { key, fromM, toM } of paintRuns(intervals)) {
      const lines = runs.get(key) ?? [];
      if (lines.length === 0) runs.set(key, lines);
      lines.push(...shownParts(stretch(stations, fromM, toM), flatten));
    }
    for (const { row, fromM, toM } of intervals) {
      const at = flatten(pointAtDepth(points, (fromM + toM) / 2));
      if (at === null) continue;
      rows.push(row);
      owners.push(name);
      places.push(at);
    }
  }
  return {
    runs: [...runs].map(([key, lines]) => ({ key, lines })).sort((a, b) => a.key.localeCompare(b.key, 'en', { numeric: true })),
    traces,
    heads,
    middles: { rows: Int32Array.from(rows), holes: owners, places, tree: treeOf(places) },
    extent: extentOf(traces.flat()),
  };
}

function treeOf(places: readonly Flat[]): KDBush | null {
  if (places.length === 0) return null;
  const tree = new KDBush(places.length);
  for (const [x, y] of places) tree.add(x, y);
  tree.finish();
  return tree;
}

export function extentOf(points: readonly Flat[]): Scene['extent'] {
  if (points.length === 0) return { low: [0, 0], high: [100, 100] };
  let [lowX, lowY, highX, highY] = [Infinity, Infinity, -Infinity, -Infinity];
  for (const [x, y] of points) {
    lowX = Math.min(lowX, x);
    lowY = Math.min(lowY, y);
    highX = Math.max(highX, x);
    highY = Math.max(highY, y);
  }
  return { low: [lowX, lowY], high: [highX, highY] };
}

/** One scale for both directions (times `exaggeration` upwards), so that the extent fits the room. */
export interface Fit {
  x: (metres: number) => number;
  y: (metres: number) => number;
  /** Pixels in a metre along x. */
  scale: number;
}

export function fitExtent({ low, high }: Scene['extent'], room: { left: number; top: number; width: number; height: number }, exaggeration = 1): Fit {
  const spanX = Math.max(1, high[0] - low[0]);
  const spanY = Math.max(1, (high[1] - low[1]) * exaggeration);
  const scale = Math.min(room.width / spanX, room.height / spanY) * 0.94;
  const [midX, midY] = [(low[0] + high[0]) / 2, (low[1] + high[1]) / 2];
  return {
    scale,
    x: (metres) => room.left + room.width / 2 + (metres - midX) * scale,
    y: (metres) => room.top + room.height / 2 - (metres - midY) * scale * exaggeration,
  };
}

/** The view now: the fit at rest, moved and scaled by the zoom. */
export interface TracePlaces {
  area: { left: number; top: number; width: number; height: number };
  base: Fit;
  zoom: { k: number; x: number; y: number };
  x: (metres: number) => number;
  y: (metres: number) => number;
}

/** The interval nearest a place, within reach, in metres of the scene. */
export function nearestMiddle({ middles }: Scene, x: number, y: number, reachM: number): { row: number; hole: string } | null {
  let best = Infinity;
  let found: number | null = null;
  for (const i of middles.tree?.within(x, y, reachM) ?? []) {
    const [mx, my] = middles.places[i] ?? [Infinity, Infinity];
    const apart = Math.hypot(mx - x, my - y);
    if (apart < best) [best, found] = [apart, i];
  }
  return found === null ? null : { row: middles.rows[found] ?? 0, hole: middles.holes[found] ?? '' };
}

/** Names without the start they share up to its last separator: TFD-019, TFD-020 become 019, 020. */
export function shortNames(names: readonly string[]): Map<string, string> {
  const [first = ''] = names;
  let shared = names.length > 2 ? first.length : 0;
  for (const name of names) while (shared > 0 && !name.startsWith(first.slice(0, shared))) shared--;
  const cut = first.slice(0, shared).search(/[-_ .][^-_ .]*$/) + 1;
  return new Map(names.map((name) => [name, name.slice(cut) === '' ? name : name.slice(cut)]));
}

/** Length of a scale bar: 1, 2 or 5 times a power of ten, drawn as 45 to 115 px. */
export function scaleBarM(pixelsPerM: number): number {
  const wanted = 45 / pixelsPerM;
  const power = 10 ** Math.floor(Math.log10(wanted));
  return ([1, 2, 5, 10].find((step) => step * power >= wanted) ?? 10) * power;
}
