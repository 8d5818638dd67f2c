import { useMemo } from 'react';
import { pointAtDepth } from './hole-geometry.ts';
import type { AxisReading, HoleTrace, TracePoint } from './hole-geometry.ts';
import { buildScene } from './trace-scene.ts';
import type { Flat } from './trace-scene.ts';
import { TraceView } from './trace-view.tsx';
import type { TraceBasics } from './trace-view.tsx';

export interface PlanViewProps extends TraceBasics {
  /** Fault traces, east and north in metres. */
  faults?: readonly { label: string; points: readonly Flat[] }[];
  /** Site checks: a triangle each. */
  flags?: readonly { label: string; east: number; north: number }[];
}

const EAST: AxisReading = { word: ' E', start: 0, sign: 1 };
const NORTH: AxisReading = { word: ' N', start: 0, sign: 1 };
const NO_FAULTS: NonNullable<PlanViewProps['faults']> = [];
const NO_FLAGS: NonNullable<PlanViewProps['flags']> = [];
const fromAbove = ({ east, north }: TracePoint): Flat => [east, north];
const placeOf = (hole: HoleTrace, depthM: number): Flat => fromAbove(pointAtDepth(hole.points, depthM));

/** Holes from above on the local grid: traces coloured by interval, collars, faults, site checks. */
export function PlanView({ faults = NO_FAULTS, flags = NO_FLAGS, ...basics }: PlanViewProps) {
  const scene = useMemo(() => buildScene(basics.holes, fromAbove, false), [basics.holes]);
  const extras = useMemo(
    () => ({
      xAxis: EAST,
      yAxis: NORTH,
      lines: faults.map(({ label, points }) => ({ label, points, kind: 'fault' as const })),
      flags: flags.map(({ label, east, north }) => ({ label, at: [east, north] as const })),
      strokePx: 4.4,
      exaggeration: 1,
    }),
    [faults, flags],
  );
  return <TraceView {...basics} scene={scene} extras={extras} usualHeight={300} placeOf={placeOf} />;
}
