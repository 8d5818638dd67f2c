import { beforeFaulting, blockAt, distanceToEarlyFault, distanceToLateFault } from './faults.ts';
import type { Block } from './faults.ts';
import { ripple } from './noise.ts';
import { dot, planeNormal, signedDistance, subtract } from './vectors.ts';
import type { Plane, Vector } from './vectors.ts';

/** Rock bodies of the scenario. */
export type RockUnit =
  | 'cover'
  | 'andesite'
  | 'mudstone'
  | 'zinc sulphide'
  | 'copper sulphide'
  | 'chlorite stringer'
  | 'sericitic rhyodacite'
  | 'rhyodacite'
  | 'dolerite';

export type Weathering = 'oxide' | 'transitional' | 'fresh';

/** What has happened to a rock, each 0 (nothing) to 1 (complete). */
export interface Change {
  /** Footwall: feldspar to white mica. */
  sericite: number;
  /** Footwall: white mica to chlorite. */
  chlorite: number;
  /** Share of copper sulphide in the semi-massive base of the lens. */
  semiMassive: number;
  /** Hanging wall: how basaltic this andesite flow is. */
  basaltic: number;
  /** Hanging wall: alteration above the lens. */
  roofAlteration: number;
}

/** Everything that the ground at one point says about a sample taken there. */
export interface Setting extends Change {
  unit: RockUnit;
  weathering: Weathering;
  block: Block;
  depthM: number;
  earlyFaultM: number;
  lateFaultM: number;
}

/** Layering before faulting: dip and dip direction, degrees. */
export const LAYERING = { dipDeg: 62, dipDirectionDeg: 90 };
const ORE_HORIZON: Plane = { point: { x: 5000, y: 8000, z: 300 }, normal: planeNormal(62, 90) };
const DOWN_DIP: Vector = { x: ORE_HORIZON.normal.z, y: 0, z: -ORE_HORIZON.normal.x };

/** Dykes cut everything, so they are given as they lie today. */
const DYKES: readonly { plane: Plane; halfThicknessM: number; phase: number }[] = [
  {
    plane: { point: { x: 5040, y: 8000, z: 300 }, normal: planeNormal(80, 62) },
    halfThicknessM: 4.4,
    phase: 0.4,
  },
  {
    plane: { point: { x: 5105, y: 7880, z: 300 }, normal: planeNormal(76, 250) },
    halfThicknessM: 3.6,
    phase: 1.9,
  },
  {
    plane: { point: { x: 4975, y: 8170, z: 300 }, normal: planeNormal(85, 38) },
    halfThicknessM: 5.2,
    phase: 3.1,
  },
];

/** Ground surface, metres above the local datum. */
export function surfaceZ(x: number, y: number): number {
  return 405 + 7 * ripple(x - 5000, y - 8000, 620, 0.7) + 0.012 * (x - 5000);
}

interface Layered {
  alongStrikeM: number;
  downDipM: number;
  /** Height above the ore horizon along the layering normal; hanging wall positive. */
  heightM: number;
}

function layered(at: Vector): Layered {
  const before = beforeFaulting(at);
  const offset = subtract(before, ORE_HORIZON.point);
  const alongStrikeM = offset.y;
  const downDipM = dot(DOWN_DIP, offset);
  const fold = 3.5 * ripple(alongStrikeM, downDipM, 260, 1.3);
  return { alongStrikeM, downDipM, heightM: signedDistance(ORE_HORIZON, before) - fold };
}

/** 1 in the middle of the lens, 0 at the edge of an ellipse of these half lengths, negative outside. */
function lensShape(
  { alongStrikeM, downDipM }: Layered,
  halfStrikeM: number,
  halfDipM: number,
): number {
  const across = (alongStrikeM / halfStrikeM) ** 2 + ((downDipM - 60) / halfDipM) ** 2;
  return 1 - across + 0.16 * ripple(alongStrikeM, downDipM, 140, 2.2);
}

const thickness = (shape: number, fullM: number): number =>
  shape > 0 ? fullM * Math.sqrt(shape) : 0;

type Host = Change & Pick<Setting, 'unit'>;

const UNCHANGED: Change = {
  sericite: 0,
  chlorite: 0,
  semiMassive: 0,
  basaltic: 0,
  roofAlteration: 0,
};
const share = (value: number): number => Math.min(1, Math.max(0, value));

function footwall(place: Layered, lensM: number): Host {
  const stringerM = thickness(lensShape(place, 300, 150), 44);
  const belowM = -place.heightM - lensM;
  const patch = ripple(place.alongStrikeM + 40, place.heightM * 3, 95, 5.1);
  if (belowM < stringerM) {
    const semiMassive = lensM > 0 ? share(1 - belowM / 2.4) ** 1.5 : 0;
    const chlorite = share(1.2 - (1.15 * belowM) / stringerM + 0.35 * patch);
    return { ...UNCHANGED, unit: 'chlorite stringer', sericite: 1, chlorite, semiMassive };
  }
  const reach = Math.max(0, lensShape(place, 420, 230));
  const sericite = Math.exp(-(((belowM - stringerM) / 46) ** 2)) * Math.min(1, 1.6 * reach);
  const chlorite = share(0.3 * patch) * Math.exp((stringerM - belowM) / 18);
  const unit = sericite > 0.4 ? 'sericitic rhyodacite' : 'rhyodacite';
  return { ...UNCHANGED, unit, sericite, chlorite };
}

/** Flows of more and less basaltic andesite, stacked along the layering, altered close above the lens. */
function hangingWall(place: Layered, aboveMudstoneM: number): Host {
  const flow = ripple(place.heightM * 4 + 60, place.alongStrikeM, 330, 0.8);
  const overLens = share(2 * lensShape(place, 300, 150));
  return {
    ...UNCHANGED,
    unit: 'andesite',
    basaltic: share(0.3 + 0.85 * flow),
    roofAlteration: 0.8 * overLens * Math.exp(-aboveMudstoneM / 16),
  };
}

function hostAt(place: Layered): Host {
  const mudstoneM = 4 + 1.6 * ripple(place.alongStrikeM, place.downDipM, 180, 0.3);
  if (place.heightM > mudstoneM) return hangingWall(place, place.heightM - mudstoneM);
  if (place.heightM > 0) return { ...UNCHANGED, unit: 'mudstone' };
  const fullM = thickness(lensShape(place, 285, 135), 27);
  const lensM = fullM < 1.2 ? 0 : fullM;
  if (-place.heightM >= lensM) return footwall(place, lensM);
  const zincShare = 0.52 + 0.12 * ripple(place.alongStrikeM, place.downDipM, 210, 4);
  const unit = -place.heightM < zincShare * lensM ? 'zinc sulphide' : 'copper sulphide';
  return { ...UNCHANGED, unit };
}

function inDyke(at: Vector): boolean {
  return DYKES.some(({ plane, halfThicknessM, phase }) => {
    const half = halfThicknessM * (1 + 0.35 * ripple(at.y, at.z, 170, phase));
    const bend = 2.5 * ripple(at.y, at.z, 240, phase + 1);
    return Math.abs(signedDistance(plane, at) - bend) < half;
  });
}

function weatheringAt(at: Vector, depthM: number): Weathering {
  const deepening = 9 * Math.exp(-distanceToLateFault(at) / 14);
  const oxideM = 14 + 3.5 * ripple(at.x, at.y, 190, 0.9) + deepening;
  if (depthM < oxideM) return 'oxide';
  return depthM < oxideM + 9 + 3 * ripple(at.x, at.y, 130, 2.8) + deepening
    ? 'transitional'
    : 'fresh';
}

/** The scenario's ground at a point. */
export function settingAt(at: Vector): Setting {
  const depthM = surfaceZ(at.x, at.y) - at.z;
  const common = {
    weathering: weatheringAt(at, depthM),
    block: blockAt(at),
    depthM,
    earlyFaultM: distanceToEarlyFault(at),
    lateFaultM: distanceToLateFault(at),
  };
  if (depthM < 4 + 1.5 * ripple(at.x, at.y, 150, 1.1)) {
    return { ...UNCHANGED, unit: 'cover', ...common };
  }
  if (inDyke(at)) return { ...UNCHANGED, unit: 'dolerite', ...common };
  return { ...hostAt(layered(at)), ...common };
}

/** Height above the ore horizon; holes are planned against it. */
export const heightAboveOre = (at: Vector): number => layered(at).heightM;
