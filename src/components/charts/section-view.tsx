import { useCallback, useMemo } from 'react';
import { pointAtDepth, sectionAxis, sectionPlace } from './hole-geometry.ts';
import type { AxisReading, HoleTrace, SectionPlane, TracePoint } from './hole-geometry.ts';
import { buildScene } from './trace-scene.ts';
import type { Flat } from './trace-scene.ts';
import { TraceView } from './trace-view.tsx';
import type { TraceBasics } from './trace-view.tsx';

export interface SectionViewProps extends TraceBasics {
  section: SectionPlane;
  /** Vertical over horizontal scale; 1 unless the page says otherwise. */
  exaggeration?: number;
  /** Points of the ground surface near the section. */
  ground?: readonly { east: number; north: number; elevation: number }[];
}

const ELEVATION: AxisReading = { word: '', start: 0, sign: 1 };
const NO_GROUND: NonNullable<SectionViewProps['ground']> = [];

/** Holes within a corridor about a vertical section, seen square to it: V = H unless said. */
export function SectionView({ section, exaggeration = 1, ground = NO_GROUND, ...basics }: SectionViewProps) {
  const { east, north, azimuthDeg, halfWidthM } = section;
  const flatten = useCallback(
    (point: TracePoint): Flat | null => {
      const { alongM, offM } = sectionPlace(point, { east, north, azimuthDeg, halfWidthM });
      return Math.abs(offM) <= halfWidthM ? [alongM, point.elevation] : null;
    },
    [east, north, azimuthDeg, halfWidthM],
  );
  const scene = useMemo(() => buildScene(basics.holes, flatten, true), [basics.holes, flatten]);
  const extras = useMemo(() => {
    const plane = { east, north, azimuthDeg, halfWidthM };
    const surface = ground
      .map((point) => ({ ...sectionPlace(point, plane), elevation: point.elevation }))
      .filter(({ offM }) => Math.abs(offM) <= halfWidthM)
      .sort((a, b) => a.alongM - b.alongM)
      .map(({ alongM, elevation }) => [alongM, elevation] as const);
    return {
      xAxis: sectionAxis(plane),
      yAxis: ELEVATION,
      lines: surface.length > 1 ? [{ label: 'ground', points: surface, kind: 'ground' as const }] : [],
      flags: [],
      strokePx: 6,
      exaggeration,
    };
  }, [east, north, azimuthDeg, halfWidthM, ground, exaggeration]);
  const placeOf = useCallback((hole: HoleTrace, depthM: number) => flatten(pointAtDepth(hole.points, depthM)), [flatten]);
  return <TraceView {...basics} scene={scene} extras={extras} usualHeight={240} placeOf={placeOf} />;
}
