import { KernelError } from '#kernels/kernel-error.ts';
import { tangentOf, toDegrees, type HoleDirection, type Vector } from './directions.ts';
import type { HolePath } from './hole-path.ts';
import { surveyNotes } from './survey-notes.ts';

/** One survey station: depth down the hole (m), azimuth and dip (degrees, dip negative down). */
export interface Station extends HoleDirection {
  depthM: number;
}

export interface DesurveyOptions {
  /** Depth at which `start` lies: 0 for a collar, else the depth of a tie-in. */
  startDepthM?: number;
  /** Length of the hole; when beyond the last station, a note says the hole is extended straight. */
  lengthM?: number;
  /** Doglegs sharper than this are noted, degrees per 30 m (drilling practice, from memory). */
  doglegLimitPer30M?: number;
}

/**
 * Positions and tangents along a surveyed hole by minimum curvature: a circular arc between
 * stations, so that the direction turns evenly.
 *
 * @param start East, north, elevation (m) of the collar.
 * @param stations At least one, in any order. Of stations at one depth the last given is kept and
 *   noted. A first station below the start is copied to it and noted; one station gives a straight
 *   hole.
 * @throws {KernelError} `too-few-rows` without stations; `bad-parameter` with { station } at a
 *   depth, azimuth or dip out of range, or a turn of more than 90 degrees in one leg.
 * @see Taylor & Mason (1972), A systematic approach to well surveying calculations; Zaremba (1973).
 */
export function desurvey(
  start: Vector,
  stations: readonly Station[],
  options: DesurveyOptions = {},
): HolePath {
  const { startDepthM = 0, lengthM, doglegLimitPer30M = 5 } = options;
  if (!start.every(Number.isFinite)) {
    throw new KernelError(
      'bad-parameter',
      `expected a collar position, found (${start.join(', ')})`,
    );
  }
  const given = sortStations(stations, startDepthM);
  const first = given[0]!;
  const used = first.depthM > startDepthM ? [{ ...first, depthM: startDepthM }, ...given] : given;
  const path = emptyPath(used.length);
  used.forEach((station, i) => {
    path.depthsM[i] = station.depthM;
    path.tangents.set(tangentOf(station), 3 * i);
  });
  path.positions.set(start, 0);
  for (let leg = 0; leg + 1 < used.length; leg++) addLeg(path, leg);
  path.notes.push(
    ...surveyNotes(stations, used, path, { startDepthM, lengthM, doglegLimitPer30M }),
  );
  return path;
}

function emptyPath(count: number): HolePath {
  return {
    depthsM: new Float64Array(count),
    positions: new Float64Array(3 * count),
    tangents: new Float64Array(3 * count),
    doglegsRad: new Float64Array(count - 1),
    ratioFactors: new Float64Array(count - 1),
    notes: [],
  };
}

/** Checks every station; ascending by depth, the last given of equal depths. */
function sortStations(stations: readonly Station[], startDepthM: number): Station[] {
  if (stations.length === 0) {
    throw new KernelError('too-few-rows', 'expected at least one survey station, found none');
  }
  const byDepth = new Map<number, Station>();
  stations.forEach((station, index) => {
    if (!(station.depthM >= startDepthM && station.depthM < Infinity)) {
      const message = `expected a station depth >= ${startDepthM} m, found ${station.depthM}`;
      throw new KernelError('bad-parameter', message, { station: index });
    }
    try {
      tangentOf(station);
    } catch (error) {
      if (!(error instanceof KernelError)) throw error;
      throw new KernelError(error.code, `${error.message} at ${station.depthM} m`, {
        station: index,
      });
    }
    byDepth.set(station.depthM, station);
  });
  return [...byDepth.values()].sort((a, b) => a.depthM - b.depthM);
}

/**
 * Adds one arc: (dm / 2)(t1 + t2) RF. The angle is 2 asin(|t2 - t1| / 2), since an arc cosine loses
 * half the digits near 0.
 */
function addLeg(
  { depthsM, positions, tangents, doglegsRad, ratioFactors }: HolePath,
  leg: number,
): void {
  const at = 3 * leg;
  const turn = tangents
    .subarray(at, at + 3)
    .map((component, k) => tangents[at + 3 + k]! - component);
  const chord = Math.hypot(...turn) / 2;
  const angle = 2 * Math.asin(Math.min(chord, 1));
  // |t2 - t1| = sqrt 2 at a right angle.
  if (chord > Math.SQRT1_2 + 1e-12) {
    const [top, bottom] = [depthsM[leg]!, depthsM[leg + 1]!];
    const message = `expected a turn of at most 90° in one leg, found ${toDegrees(angle).toFixed(1)}° between ${top} and ${bottom} m`;
    throw new KernelError('bad-parameter', message, { station: leg + 1 });
  }
  const factor = angle < 1e-4 ? 1 + (angle * angle) / 12 : (2 / angle) * Math.tan(angle / 2);
  const half = ((depthsM[leg + 1]! - depthsM[leg]!) / 2) * factor;
  for (let k = at; k < at + 3; k++) {
    positions[k + 3] = positions[k]! + half * (tangents[k]! + tangents[k + 3]!);
  }
  doglegsRad[leg] = angle;
  ratioFactors[leg] = factor;
}
