import * as z from 'zod';
import { toDegrees, type Vector } from '#kernels/geometry/directions.ts';
import { desurvey, type Station } from '#kernels/geometry/minimum-curvature.ts';
import { positionsAtDepths } from '#kernels/geometry/position-at-depth.ts';
import { numbersOf, type ReferenceCheck, type ReferenceSet } from '#tests/support/reference.ts';
import type { Adapters } from '../adapter.ts';
import { rowsOfTable } from '../transform.ts';

const Start = z.tuple([z.number(), z.number(), z.number()]);
const Depths = z.array(z.number());
const WorkedStations = z.array(
  z.object({ md: z.number(), inclination: z.number(), azimuth: z.number() }),
);

function stationsOf(set: ReferenceSet, check: ReferenceCheck): Station[] {
  const [azimuths, dips] = ['azimuth', 'dip'].map((column) => numbersOf(set, check, column));
  return Array.from(numbersOf(set, check, 'md'), (depthM, row) => ({
    depthM,
    azimuth: azimuths?.[row] ?? NaN,
    dip: dips?.[row] ?? NaN,
  }));
}

const pathFrom = (collar: Vector, stations: Station[]) =>
  desurvey(collar, stations, { startDepthM: stations[0]?.depthM ?? 0 });

const pathOf = (set: ReferenceSet, check: ReferenceCheck) =>
  pathFrom(Start.parse(check.inputs['start']), stationsOf(set, check));

/** Paths by minimum curvature; positions are east, north, elevation. */
export const DESURVEY: Adapters = {
  minimum_curvature: (set, check) => rowsOfTable(pathOf(set, check).positions, 3),
  dogleg: (set, check) => pathOf(set, check).doglegsRad.map(toDegrees),
  ratio_factor: (set, check) => pathOf(set, check).ratioFactors,
  position_at_depth: (set, check) => {
    const depths = Float64Array.from(Depths.parse(check.inputs['depths']));
    return rowsOfTable(positionsAtDepths(pathOf(set, check), depths).positions, 3);
  },
  // Stations in the inputs, inclination from the vertical.
  minimum_curvature_worked: (_set, check) => {
    const stations = WorkedStations.parse(check.inputs['stations']).map(
      ({ md, inclination, azimuth }) => ({ depthM: md, azimuth, dip: inclination - 90 }),
    );
    const path = pathFrom([0, 0, 0], stations);
    const [east = NaN, north = NaN, up = NaN] = path.positions.slice(-3);
    return { dogleg_rad: path.doglegsRad, north, east, tvd: -up };
  },
};
