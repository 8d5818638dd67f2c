import { add, direction, dot, scale } from './vectors.ts';
import type { Vector } from './vectors.ts';

/** One survey station: depth down the hole, azimuth and dip (negative down), degrees. */
export interface Station {
  depthM: number;
  azimuthDeg: number;
  dipDeg: number;
}

interface Leg {
  startM: number;
  lengthM: number;
  from: Vector;
  tangents: [Vector, Vector];
  bendRad: number;
}

/** A hole's line through the ground. */
export interface HolePath {
  positionAt(depthM: number): Vector;
  tangentAt(depthM: number): Vector;
}

/** Blend of the two end tangents on the great circle between them, at a share of the leg. */
function tangentOn(leg: Leg, share: number): Vector {
  const [t1, t2] = leg.tangents;
  if (leg.bendRad < 1e-8) return t1;
  const sine = Math.sin(leg.bendRad);
  return add(
    scale(t1, Math.sin(leg.bendRad * (1 - share)) / sine),
    scale(t2, Math.sin(leg.bendRad * share) / sine),
  );
}

function positionOn(leg: Leg, share: number): Vector {
  const [t1, t2] = leg.tangents;
  const bend = leg.bendRad;
  if (bend < 1e-8) return add(leg.from, scale(t1, leg.lengthM * share));
  const factor = leg.lengthM / (bend * Math.sin(bend));
  const first = factor * (Math.cos(bend * (1 - share)) - Math.cos(bend));
  const second = factor * (1 - Math.cos(bend * share));
  return add(leg.from, add(scale(t1, first), scale(t2, second)));
}

/**
 * Minimum curvature between stations, straight on beyond the last.
 *
 * @param stations At least one, by depth, the first at 0.
 * @see Taylor & Mason (1972), A systematic approach to well surveying calculations (from memory).
 */
export function holePath(collar: Vector, stations: readonly Station[]): HolePath {
  const legs: Leg[] = [];
  let from = collar;
  stations.forEach((station, i) => {
    const next = stations[i + 1];
    const t1 = direction(station.azimuthDeg, station.dipDeg);
    const t2 = next ? direction(next.azimuthDeg, next.dipDeg) : t1;
    const bendRad = next ? Math.acos(Math.min(1, dot(t1, t2))) : 0;
    const lengthM = next ? next.depthM - station.depthM : 1;
    const leg: Leg = { startM: station.depthM, lengthM, from, tangents: [t1, t2], bendRad };
    legs.push(leg);
    from = positionOn(leg, 1);
  });
  const legAt = (depthM: number): Leg => {
    const leg = legs.findLast((one) => one.startM <= depthM) ?? legs[0];
    if (!leg) throw new RangeError('expected at least one survey station, found none');
    return leg;
  };
  const shareOf = (leg: Leg, depthM: number): number => (depthM - leg.startM) / leg.lengthM;
  return {
    positionAt: (depthM) => positionOn(legAt(depthM), shareOf(legAt(depthM), depthM)),
    tangentAt: (depthM) => tangentOn(legAt(depthM), shareOf(legAt(depthM), depthM)),
  };
}
