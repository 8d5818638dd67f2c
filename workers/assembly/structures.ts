import type { StructureReading } from '#contract/holes.ts';
import { planeFromCore, type CoreConvention } from '#kernels/geometry/oriented-core.ts';
import { positionAtDepth } from '#kernels/geometry/position-at-depth.ts';
import type { SurveyedHole } from './hole-paths.ts';
import type { LoadedTable } from './read-rows.ts';

export interface PlacedStructure extends StructureReading {
  hole: string;
}

const orNull = (value: number | undefined): number | null => (value === undefined || Number.isNaN(value) ? null : value);

/** Azimuth and dip of a unit vector pointing down the hole (east, north, up). */
function directionOf([east, north, up]: readonly [number, number, number]): { azimuth: number; dip: number } {
  const azimuth = (Math.atan2(east, north) * 180) / Math.PI;
  return { azimuth: azimuth < 0 ? azimuth + 360 : azimuth, dip: (Math.asin(Math.max(-1, Math.min(1, up))) * 180) / Math.PI };
}

/**
 * Readings as planes: dip and dip direction as given, or turned from alpha and beta by the hole's
 * direction there. Alpha alone gives no plane.
 */
export function placeStructures(table: LoadedTable, holes: ReadonlyMap<string, SurveyedHole>, convention: CoreConvention): PlacedStructure[] {
  const names = table.texts('hole');
  const [types, confidences] = [table.texts('structure type'), table.texts('confidence')];
  const columns = ['depth', 'alpha', 'beta', 'dip', 'dip direction'].map((name) => table.numbers(name));
  return names.map((hole, row) => {
    const [depthM, alpha, beta, dip, dipDirection] = columns.map((column) => orNull(column[row]));
    const reading = {
      hole, depthM: depthM ?? 0, type: types[row] || 'structure', confidence: confidences[row] || 'not stated', alpha: alpha ?? null, beta: beta ?? null, dip: dip ?? null, dipDirection: dipDirection ?? null,
    };
    const surveyed = holes.get(hole);
    const isToTurn = reading.dip === null && reading.alpha !== null && reading.beta !== null && surveyed !== undefined;
    if (!isToTurn || reading.alpha === null || reading.beta === null) return reading;
    const { tangent } = positionAtDepth(surveyed.path, reading.depthM);
    const plane = planeFromCore(directionOf(tangent), { alpha: reading.alpha, beta: reading.beta }, convention);
    return { ...reading, dip: plane.dip, dipDirection: plane.dipDirection };
  });
}
