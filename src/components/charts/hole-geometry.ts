/** A desurveyed station of a hole. */
export interface TracePoint {
  depthM: number;
  east: number;
  north: number;
  elevation: number;
}

/** An interval coloured on a trace: by category slot, or by step 1 to 6 of the sequence. */
export interface TraceInterval {
  fromM: number;
  toM: number;
  /** Row in the frame, for hover and selection. */
  row: number;
  slot?: number | null;
  stop?: number | null;
}

export interface HoleTrace {
  name: string;
  /** From the collar down, at least two. */
  points: readonly TracePoint[];
  intervals: readonly TraceInterval[];
}

/** Place on a hole at a depth, linear between stations; beyond the ends, the end. */
export function pointAtDepth(points: readonly TracePoint[], depthM: number): TracePoint {
  const first = points[0];
  if (first === undefined) throw new RangeError('expected a hole with stations, found none');
  let before = first;
  for (const after of points) {
    if (after.depthM >= depthM && after !== before) {
      const share = Math.max(0, (depthM - before.depthM) / (after.depthM - before.depthM || 1));
      const mix = (a: number, b: number) => a + share * (b - a);
      return {
        depthM,
        east: mix(before.east, after.east),
        north: mix(before.north, after.north),
        elevation: mix(before.elevation, after.elevation),
      };
    }
    before = after;
  }
  return before;
}

/** The stretch of a trace between two depths: its ends and the stations between. */
export function stretch(points: readonly TracePoint[], fromM: number, toM: number): TracePoint[] {
  const between = points.filter(({ depthM }) => depthM > fromM && depthM < toM);
  return [pointAtDepth(points, fromM), ...between, pointAtDepth(points, toM)];
}

export type PaintKey = `slot-${number}` | `stop-${number}` | 'none';

export function paintKey({ slot, stop }: TraceInterval): PaintKey {
  if (slot !== undefined && slot !== null) return `slot-${slot}`;
  return stop !== undefined && stop !== null ? `stop-${stop}` : 'none';
}

/** Neighbouring intervals of one paint as one run: far fewer strokes to draw. */
export function paintRuns(intervals: readonly TraceInterval[]): { key: PaintKey; fromM: number; toM: number }[] {
  const runs: { key: PaintKey; fromM: number; toM: number }[] = [];
  for (const interval of [...intervals].sort((a, b) => a.fromM - b.fromM)) {
    const key = paintKey(interval);
    const last = runs.at(-1);
    if (last !== undefined && last.key === key && interval.fromM - last.toM < 1e-6) last.toM = interval.toM;
    else runs.push({ key, fromM: interval.fromM, toM: interval.toM });
  }
  return runs;
}

/** Depth in the middle of each unbroken run of chosen intervals. */
export function pickedMiddles(intervals: readonly TraceInterval[], isChosen: (row: number) => boolean): number[] {
  const middles: number[] = [];
  let run: { fromM: number; toM: number } | null = null;
  for (const { row, fromM, toM } of intervals) {
    if (!isChosen(row)) continue;
    if (run !== null && fromM - run.toM < 1e-6) run.toM = toM;
    else {
      if (run !== null) middles.push((run.fromM + run.toM) / 2);
      run = { fromM, toM };
    }
  }
  if (run !== null) middles.push((run.fromM + run.toM) / 2);
  return middles;
}

/** Step 1 to 6 of the sequence for a value, by the five limits between the steps. */
export function sequenceStop(value: number, limits: readonly number[]): number | null {
  if (!Number.isFinite(value)) return null;
  return 1 + limits.slice(0, 5).filter((limit) => value >= limit).length;
}

/** A vertical section: its line through a point, and the half width of the corridor it takes in. */
export interface SectionPlane {
  east: number;
  north: number;
  /** Direction in which the section runs to the right, degrees from north. */
  azimuthDeg: number;
  halfWidthM: number;
}

/** Distance along the section line and off it (right of the line is positive). */
export function sectionPlace(point: { east: number; north: number }, section: SectionPlane): { alongM: number; offM: number } {
  const azimuth = (section.azimuthDeg * Math.PI) / 180;
  const [de, dn] = [point.east - section.east, point.north - section.north];
  return { alongM: de * Math.sin(azimuth) + dn * Math.cos(azimuth), offM: de * Math.cos(azimuth) - dn * Math.sin(azimuth) };
}

/** A coordinate read along an axis of the drawing: `start` at 0 m, rising or falling. */
export interface AxisReading {
  word: string;
  start: number;
  sign: 1 | -1;
}

/** The grid coordinate along a section that runs within a degree of the grid, else metres along. */
export function sectionAxis(section: SectionPlane): AxisReading {
  const turn = ((section.azimuthDeg % 360) + 360) % 360;
  const near = (angle: number) => Math.abs(((turn - angle + 540) % 360) - 180) < 1;
  if (near(0)) return { word: ' N', start: section.north, sign: 1 };
  if (near(180)) return { word: ' N', start: section.north, sign: -1 };
  if (near(90)) return { word: ' E', start: section.east, sign: 1 };
  if (near(270)) return { word: ' E', start: section.east, sign: -1 };
  return { word: ' m', start: 0, sign: 1 };
}
