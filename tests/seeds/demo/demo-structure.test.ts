import { describe, expect, it } from 'vitest';
import { makeDemoDeposit } from '#seeds/demo/demo-deposit.ts';
import { LATE_FAULT, blockAt, planeOf } from '#seeds/demo/faults.ts';
import { settingAt } from '#seeds/demo/geology-model.ts';
import { holePath } from '#seeds/demo/hole-path.ts';
import { add, scale } from '#seeds/demo/vectors.ts';
import type { Vector } from '#seeds/demo/vectors.ts';
import { readFile } from './read-demo.ts';

const deposit = makeDemoDeposit();
const RADIANS = Math.PI / 180;

/** Alpha and beta back to the upward normal, written apart from the generator. */
function normalFromCore(tangent: Vector, alphaDeg: number, betaDeg: number): Vector {
  const azimuth = Math.atan2(tangent.x, tangent.y);
  const fromVertical = Math.acos(-tangent.z);
  const bottom = {
    x: -Math.cos(fromVertical) * Math.sin(azimuth),
    y: -Math.cos(fromVertical) * Math.cos(azimuth),
    z: -Math.sin(fromVertical),
  };
  const side = { x: -Math.cos(azimuth), y: Math.sin(azimuth), z: 0 };
  const radial = add(
    scale(bottom, Math.cos(betaDeg * RADIANS)),
    scale(side, Math.sin(betaDeg * RADIANS)),
  );
  const normal = add(
    scale(tangent, Math.sin(alphaDeg * RADIANS)),
    scale(radial, -Math.cos(alphaDeg * RADIANS)),
  );
  return normal.z < 0 ? scale(normal, -1) : normal;
}

interface Reading {
  normal: Vector;
  at: Vector;
  type: string;
  confidence: string;
}

function readings(): Reading[] {
  const collars = new Map(readFile(deposit, 'collar.csv').rows.map((row) => [row[0], row]));
  const survey = readFile(deposit, 'survey.csv').rows.filter((row) => Number(row[2]) < 360);
  const paths = new Map(
    [...collars].map(([hole, row]) => {
      const stations = survey
        .filter((station) => station[0] === hole)
        .map((station) => ({
          depthM: Number(station[1]),
          azimuthDeg: Number(station[2]),
          dipDeg: Number(station[3]),
        }));
      return [
        hole,
        holePath({ x: Number(row[1]), y: Number(row[2]), z: Number(row[3]) }, stations),
      ];
    }),
  );
  return readFile(deposit, 'structure.csv').rows.map(
    ([hole, depth, type = '', alpha, beta, confidence = '']) => {
      const path = paths.get(hole);
      if (!path) throw new Error(`expected a path for ${hole}, found none`);
      const normal = normalFromCore(path.tangentAt(Number(depth)), Number(alpha), Number(beta));
      return { normal, at: path.positionAt(Number(depth)), type, confidence };
    },
  );
}

const all = readings();

/** Mean upward normal's dip direction and dip, and the mean resultant length. */
function meanPlane(list: readonly Reading[]): {
  dipDirection: number;
  dip: number;
  length: number;
} {
  const sum = list.reduce((total, { normal }) => add(total, normal), { x: 0, y: 0, z: 0 });
  const length = Math.hypot(sum.x, sum.y, sum.z);
  const dip = Math.acos(sum.z / length) / RADIANS;
  return { dipDirection: Math.atan2(sum.x, sum.y) / RADIANS, dip, length: length / list.length };
}

const foliationIn = (block: string, confidence: string): Reading[] =>
  all.filter(
    (one) => one.type === 'foliation' && one.confidence === confidence && blockAt(one.at) === block,
  );

describe('structure', () => {
  it('has foliation that is tight in each block and turned by some 20° across the late fault', () => {
    const south = meanPlane(foliationIn('south', 'good'));
    const north = meanPlane(foliationIn('north', 'good'));
    expect(south.length).toBeGreaterThan(0.97);
    expect(north.length).toBeGreaterThan(0.97);
    expect(north.dipDirection - south.dipDirection).toBeGreaterThan(15);
    expect(north.dipDirection - south.dipDirection).toBeLessThan(30);
  });

  it('scatters readings of poor confidence much more than good ones', () => {
    expect(meanPlane(foliationIn('south', 'poor')).length).toBeLessThan(0.93);
  });

  it('measures faults within a few metres of a fault plane, with its attitude', () => {
    const late = all.filter(({ type, confidence, at }) => {
      const { point, normal } = planeOf(LATE_FAULT);
      const distance =
        normal.x * (at.x - point.x) + normal.y * (at.y - point.y) + normal.z * (at.z - point.z);
      return type === 'fault' && confidence === 'good' && Math.abs(distance) < 3;
    });
    expect(late.length).toBeGreaterThan(10);
    expect(meanPlane(late).dip).toBeGreaterThan(LATE_FAULT.dipDeg - 6);
    expect(meanPlane(late).dip).toBeLessThan(LATE_FAULT.dipDeg + 6);
  });

  it('has the lens offset by tens of metres across the late fault', () => {
    /** Easting of the first mudstone met going west at this elevation, close to one side of the fault. */
    const contact = (y: number): number => {
      for (let x = 5300; x > 4700; x -= 0.5) {
        if (settingAt({ x, y, z: 260 }).unit === 'mudstone') return x;
      }
      return NaN;
    };
    // At z 260 and x 5020 the fault plane lies at y 8080.
    const step = contact(8072) - contact(8090);
    expect(step).toBeGreaterThan(15);
    expect(step).toBeLessThan(120);
  });
});
