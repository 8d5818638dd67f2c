import { noGrades } from './analytes.ts';
import type { AnalyteSymbol } from './analytes.ts';
import type { TextTable } from './assay-files.ts';
import { compositionOf } from './geochemistry.ts';
import type { HoleNoise } from './geochemistry.ts';
import { FAULTS } from './faults.ts';
import { settingAt, surfaceZ } from './geology-model.ts';
import type { Hole } from './holes.ts';
import { routineCell } from './laboratory.ts';
import { roundTo } from './noise.ts';

export function collarTable(holes: readonly Hole[]): TextTable {
  const rows = holes.map(({ id, collar, lengthM, campaign, startedOn }) => [
    id,
    collar.x.toFixed(2),
    collar.y.toFixed(2),
    collar.z.toFixed(2),
    lengthM.toFixed(1),
    String(campaign),
    startedOn,
  ]);
  return { header: ['hole_id', 'x', 'y', 'z', 'length_m', 'campaign', 'date'], rows };
}

export function surveyTable(holes: readonly Hole[]): TextTable {
  const rows = holes.flatMap(({ id, stations }) =>
    stations.map(({ depthM, azimuthDeg, dipDeg }) => [
      id,
      depthM.toFixed(1),
      ((azimuthDeg + 360) % 360).toFixed(1),
      dipDeg.toFixed(1),
    ]),
  );
  return { header: ['hole_id', 'depth_m', 'azimuth', 'dip'], rows };
}

export function faultTable(): TextTable {
  const rows = FAULTS.map(({ name, point, dipDeg, dipDirectionDeg, order, note }) => [
    name,
    String(point.x),
    String(point.y),
    String(point.z),
    String(dipDeg),
    String(dipDirectionDeg),
    String(order),
    note,
  ]);
  return { header: ['name', 'x', 'y', 'z', 'dip', 'dip_direction', 'order', 'note'], rows };
}

const SOIL_ANALYTES: readonly AnalyteSymbol[] = [
  'Ag',
  'As',
  'Ba',
  'Cu',
  'Fe',
  'Hg',
  'Mn',
  'Pb',
  'Sb',
  'Zn',
];
const SOIL_SPACING_M = 50;
/** Soil remembers the rock below it only in part. */
const SOIL_SHARE_OF_ROCK = 0.25;

/** Soil on a square grid: cover diluted with the rock ten metres down. */
export function soilTable(from: HoleNoise): TextTable {
  const rows: string[][] = [];
  for (let northing = 7700; northing <= 8300; northing += SOIL_SPACING_M) {
    for (let easting = 4800; easting <= 5250; easting += SOIL_SPACING_M) {
      const x = roundTo(easting + 4 * from.noise.normal(), 1);
      const y = roundTo(northing + 4 * from.noise.normal(), 1);
      const z = roundTo(surfaceZ(x, y), 1);
      from.wander.step();
      const soil = compositionOf(settingAt({ x, y, z: z - 0.3 }), from);
      const rock = compositionOf(settingAt({ x, y, z: z - 10 }), from);
      const mixed = noGrades();
      for (const analyte of SOIL_ANALYTES) {
        mixed[analyte] =
          (1 - SOIL_SHARE_OF_ROCK) * soil[analyte] + SOIL_SHARE_OF_ROCK * rock[analyte];
      }
      const cells = SOIL_ANALYTES.map((analyte) =>
        routineCell(mixed[analyte], analyte, 2, from.noise),
      );
      const id = `SOIL-${String(rows.length + 1).padStart(3, '0')}`;
      rows.push([id, x.toFixed(1), y.toFixed(1), z.toFixed(1), ...cells]);
    }
  }
  const headings = SOIL_ANALYTES.map((analyte) => `${analyte}_${analyte === 'Fe' ? 'pct' : 'ppm'}`);
  return { header: ['sample_id', 'x', 'y', 'z', ...headings], rows };
}
