import { add, planeNormal, rotate, scale, signedDistance, subtract, unit } from './vectors.ts';
import type { Plane, Vector } from './vectors.ts';

/** A fault of the scenario, as the geologist's table gives it. */
export interface Fault {
  name: string;
  point: Vector;
  dipDeg: number;
  dipDirectionDeg: number;
  /** 1 = oldest. */
  order: number;
  note: string;
}

export const EARLY_FAULT: Fault = {
  name: 'Tallow fault',
  point: { x: 5000, y: 7865, z: 300 },
  dipDeg: 80,
  dipDirectionDeg: 172,
  order: 1,
  note: 'Older than the sulphide; no offset of the lens seen; arsenic, antimony and mercury along it',
};

export const LATE_FAULT: Fault = {
  name: 'Gannet fault',
  point: { x: 5000, y: 8060, z: 300 },
  dipDeg: 70,
  dipDirectionDeg: 345,
  order: 2,
  note: 'Younger than the sulphide, older than the dolerite; north block down and turned clockwise',
};

export const FAULTS: readonly Fault[] = [EARLY_FAULT, LATE_FAULT];

/** North block against south block: how far it slid and turned. */
const SLIP: Vector = { x: -16, y: 12, z: -38 };
const TURN_AXIS = unit({ x: 0.15, y: 0.1, z: -1 });
const TURN_DEG = 22;

export const planeOf = (fault: Fault): Plane => ({
  point: fault.point,
  normal: planeNormal(fault.dipDeg, fault.dipDirectionDeg),
});

const earlyPlane = planeOf(EARLY_FAULT);
const latePlane = planeOf(LATE_FAULT);

export type Block = 'south' | 'north';

export const blockAt = (at: Vector): Block =>
  signedDistance(latePlane, at) > 0 ? 'north' : 'south';
export const distanceToEarlyFault = (at: Vector): number =>
  Math.abs(signedDistance(earlyPlane, at));
export const distanceToLateFault = (at: Vector): number => Math.abs(signedDistance(latePlane, at));

/** Where this rock lay before the late fault moved. */
export function beforeFaulting(at: Vector): Vector {
  if (blockAt(at) === 'south') return at;
  const slidBack = subtract(subtract(at, SLIP), latePlane.point);
  return add(rotate(slidBack, TURN_AXIS, -TURN_DEG), latePlane.point);
}

/** A direction fixed in the rock, as it lies today in this block. */
export const afterFaulting = (a: Vector, block: Block): Vector =>
  block === 'south' ? a : rotate(a, TURN_AXIS, TURN_DEG);

/** The upward of the two normals. */
export const upward = (normal: Vector): Vector => (normal.z < 0 ? scale(normal, -1) : normal);
