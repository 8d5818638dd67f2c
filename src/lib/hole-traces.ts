import type { HoleRow } from '#contract/holes.ts';
import type { FaultPlane } from '#contract/snapshots.ts';
import type { HoleTrace } from '#src/components/charts/hole-geometry.ts';

type Flat = readonly [east: number, north: number];

/** A hole as the plan draws it; depths are lengths along its trace. */
export function traceOf({ hole, trace }: HoleRow): HoleTrace {
  let depthM = 0;
  const points = trace.map(([east, north, elevation], index) => {
    const before = trace[index - 1];
    if (before) depthM += Math.hypot(east - before[0], north - before[1], elevation - before[2]);
    return { depthM, east, north, elevation };
  });
  return { name: hole, points, intervals: [] };
}

/** East and north reached by all traces, or null without holes. */
export function reachOf(holes: readonly HoleRow[]): { low: Flat; high: Flat } | null {
  const points = holes.flatMap(({ trace }) => trace);
  if (points.length === 0) return null;
  const easts = points.map(([east]) => east);
  const norths = points.map(([, north]) => north);
  return {
    low: [Math.min(...easts), Math.min(...norths)],
    high: [Math.max(...easts), Math.max(...norths)],
  };
}

/**
 * Where a fault plane meets the level of its point, as a line within the reach of the holes: its
 * strike is a quarter turn from the dip direction. Null where the line passes the holes by.
 */
export function faultLine(
  fault: FaultPlane,
  reach: { low: Flat; high: Flat },
): { label: string; points: Flat[] } | null {
  const turn = (fault.dipDirection * Math.PI) / 180;
  const along: Flat = [Math.cos(turn), -Math.sin(turn)];
  const start: Flat = [fault.x, fault.y];
  let [from, to] = [-Infinity, Infinity];
  for (const axis of [0, 1] as const) {
    const [low, high] = [reach.low[axis] - start[axis], reach.high[axis] - start[axis]];
    if (Math.abs(along[axis]) < 1e-9) {
      if (low > 0 || high < 0) return null;
      continue;
    }
    const [a, b] = [low / along[axis], high / along[axis]];
    from = Math.max(from, Math.min(a, b));
    to = Math.min(to, Math.max(a, b));
  }
  if (!(from < to)) return null;
  const at = (t: number): Flat => [start[0] + t * along[0], start[1] + t * along[1]];
  return { label: fault.name, points: [at(from), at(to)] };
}
