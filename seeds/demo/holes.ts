import { surfaceZ, heightAboveOre } from './geology-model.ts';
import { holePath } from './hole-path.ts';
import type { HolePath, Station } from './hole-path.ts';
import { roundTo } from './noise.ts';
import type { Noise } from './noise.ts';
import { direction, scale, subtract } from './vectors.ts';
import type { Vector } from './vectors.ts';

export type Campaign = 1 | 2;

/** One planned and drilled hole. */
export interface Hole {
  id: string;
  campaign: Campaign;
  collar: Vector;
  lengthM: number;
  /** ISO 8601 day the hole was started. */
  startedOn: string;
  stations: Station[];
  path: HolePath;
}

interface Target {
  campaign: Campaign;
  sectionY: number;
  /** Elevation at which the hole should meet the ore horizon. */
  z: number;
}

const FIRST_SECTION_Y = 7700;
const SECTION_STEP_M = 50;
const SECTIONS = 13;
const WIDE_LEVELS = [372, 305, 240, 185];
const INFILL_LEVELS = [350, 312, 272, 228, 180];
const DEEP_SECTIONS = [0, 2, 4, 6, 8, 10, 12];

/** Every other section by the first campaign; infill sections and deeper holes by the second. */
function planTargets(): Target[] {
  const targets: Target[] = [];
  for (const campaign of [1, 2] as const) {
    for (let i = 0; i < SECTIONS; i++) {
      const sectionY = FIRST_SECTION_Y + SECTION_STEP_M * i;
      const wide = i % 2 === 0;
      if (campaign === 1 && wide)
        for (const z of WIDE_LEVELS) targets.push({ campaign, sectionY, z });
      if (campaign === 2 && !wide)
        for (const z of INFILL_LEVELS) targets.push({ campaign, sectionY, z });
      if (campaign === 2 && DEEP_SECTIONS.includes(i)) targets.push({ campaign, sectionY, z: 212 });
    }
  }
  return targets;
}

/** Easting of the ore horizon on a section at an elevation, by bisection. */
function oreEasting(sectionY: number, z: number): number {
  let west = 4600;
  let east = 5600;
  for (let i = 0; i < 40; i++) {
    const middle = (west + east) / 2;
    if (heightAboveOre({ x: middle, y: sectionY, z }) > 0) east = middle;
    else west = middle;
  }
  return (west + east) / 2;
}

/** Distance from the target back up the planned line to the ground surface. */
function planToSurface(target: Vector, along: Vector): number {
  let metres = 0;
  for (let i = 0; i < 8; i++) {
    const at = subtract(target, scale(along, metres));
    metres += (surfaceZ(at.x, at.y) - at.z) / -along.z;
  }
  return metres;
}

/** Stations each 30 m: the hole lifts and swings a little, as holes do. */
function drillStations(
  noise: Noise,
  azimuthDeg: number,
  dipDeg: number,
  lengthM: number,
): Station[] {
  const lift = noise.uniform(0.15, 0.75);
  const swing = noise.uniform(-0.2, 1.1);
  const stations: Station[] = [];
  let azimuth = azimuthDeg;
  let dip = dipDeg;
  for (let depthM = 0; depthM <= lengthM; depthM += 30) {
    stations.push({ depthM, azimuthDeg: roundTo(azimuth, 1), dipDeg: roundTo(dip, 1) });
    azimuth += swing + 0.35 * noise.normal();
    dip += lift + 0.25 * noise.normal();
  }
  return stations;
}

const twoDigits = (value: number): string => String(value).padStart(2, '0');

/** A made-up calendar: each campaign drills one hole every few days over two field seasons. */
function startDay(campaign: Campaign, order: number): string {
  const year = (campaign === 1 ? 2012 : 2021) + Math.floor(order / 20);
  const day = (order % 20) * 9;
  return `${year}-${twoDigits(4 + Math.floor(day / 27))}-${twoDigits(1 + (day % 27))}`;
}

function drill(target: Target, index: number, order: number, noise: Noise): Hole {
  const azimuthDeg = 270 + noise.uniform(-2, 2);
  const dipDeg = -noise.uniform(58, 66);
  const along = direction(azimuthDeg, dipDeg);
  const aim: Vector = { x: oreEasting(target.sectionY, target.z), y: target.sectionY, z: target.z };
  const toTarget = planToSurface(aim, along);
  const planned = subtract(aim, scale(along, toTarget));
  const x = roundTo(planned.x + noise.normal(), 2);
  const y = roundTo(planned.y + noise.normal(), 2);
  const collar: Vector = { x, y, z: roundTo(surfaceZ(x, y), 2) };
  const wanted = toTarget + noise.uniform(108, 150);
  const lengthM = roundTo(Math.min(360, Math.max(180, wanted)), 1);
  const stations = drillStations(noise, azimuthDeg, dipDeg, lengthM);
  return {
    id: `VAR-${String(index + 1).padStart(3, '0')}`,
    campaign: target.campaign,
    collar,
    lengthM,
    startedOn: startDay(target.campaign, order),
    stations,
    path: holePath(collar, stations),
  };
}

/** All holes of both campaigns, in the order they were drilled. */
export function drillHoles(noise: Noise): Hole[] {
  const targets = planTargets();
  const firstOfSecond = targets.findIndex((target) => target.campaign === 2);
  return targets.map((target, i) =>
    drill(target, i, target.campaign === 1 ? i : i - firstOfSecond, noise),
  );
}
