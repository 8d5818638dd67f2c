import type { TextTable } from './assay-files.ts';
import { EARLY_FAULT, LATE_FAULT, afterFaulting, planeOf, upward } from './faults.ts';
import type { Setting } from './geology-model.ts';
import { LAYERING } from './geology-model.ts';
import { STEP_M } from './hole-geology.ts';
import type { HoleGeology } from './hole-geology.ts';
import type { Noise } from './noise.ts';
import { add, cross, dot, planeNormal, scale, unit } from './vectors.ts';
import type { Vector } from './vectors.ts';

type StructureType = 'foliation' | 'bedding' | 'fault' | 'vein';
type Confidence = 'good' | 'moderate' | 'poor';

/** Attitudes in the south block, before the north block turned. */
const FOLIATION = planeNormal(74, 98);
const BEDDING = planeNormal(LAYERING.dipDeg, LAYERING.dipDirectionDeg);
const VEIN = planeNormal(58, 112);

/** Scatter of a reading about the true plane, as a share of the unit normal on each axis. */
const SCATTER: Record<Confidence, number> = { good: 0.06, moderate: 0.13, poor: 0.42 };

const DEGREES = 180 / Math.PI;

export interface CoreAngles {
  alphaDeg: number;
  betaDeg: number;
}

/**
 * Alpha and beta of a plane in core: alpha between core axis and plane, beta clockwise looking down
 * the hole from the bottom line to the lower end of the ellipse.
 */
export function coreAngles(planeUpNormal: Vector, tangent: Vector): CoreAngles {
  const horizontal = Math.hypot(tangent.x, tangent.y);
  const bottom: Vector = {
    x: (tangent.x / horizontal) * tangent.z,
    y: (tangent.y / horizontal) * tangent.z,
    z: -horizontal,
  };
  const side = cross(tangent, bottom);
  const normal = dot(planeUpNormal, tangent) < 0 ? scale(planeUpNormal, -1) : planeUpNormal;
  const sine = Math.min(1, dot(normal, tangent));
  const radial = scale(add(normal, scale(tangent, -sine)), -1);
  const betaDeg = Math.atan2(dot(radial, side), dot(radial, bottom)) * DEGREES;
  return { alphaDeg: Math.asin(sine) * DEGREES, betaDeg: (betaDeg + 360) % 360 };
}

function scattered(normal: Vector, confidence: Confidence, noise: Noise): Vector {
  const spread = SCATTER[confidence];
  const nudge: Vector = {
    x: spread * noise.normal(),
    y: spread * noise.normal(),
    z: spread * noise.normal(),
  };
  return upward(unit(add(normal, nudge)));
}

/** What a geologist would measure here, and the plane it really has. */
function chooseStructure(setting: Setting, noise: Noise): { type: StructureType; normal: Vector } {
  if (setting.lateFaultM < 2.5) return { type: 'fault', normal: planeOf(LATE_FAULT).normal };
  if (setting.earlyFaultM < 2.5) return { type: 'fault', normal: planeOf(EARLY_FAULT).normal };
  const bedded = setting.unit === 'mudstone' || (setting.unit === 'andesite' && noise.chance(0.3));
  if (bedded) return { type: 'bedding', normal: afterFaulting(BEDDING, setting.block) };
  if (setting.unit === 'chlorite stringer' && noise.chance(0.35)) {
    return { type: 'vein', normal: afterFaulting(VEIN, setting.block) };
  }
  return { type: 'foliation', normal: afterFaulting(FOLIATION, setting.block) };
}

function confidenceFor(geology: HoleGeology, noise: Noise): Confidence {
  const draw = noise.uniform(0, 1);
  const older = geology.hole.campaign === 1;
  if (draw < (older ? 0.4 : 0.7)) return 'good';
  return draw < (older ? 0.72 : 0.92) ? 'moderate' : 'poor';
}

/** Metres between readings: closer in ore and at faults. */
function spacing(setting: Setting): number {
  if (Math.min(setting.earlyFaultM, setting.lateFaultM) < 4) return 1.5;
  if (setting.unit === 'andesite' || setting.unit === 'rhyodacite') return 14;
  return setting.unit === 'sericitic rhyodacite' ? 9 : 4;
}

function readingsOf(geology: HoleGeology, noise: Noise): string[][] {
  const { hole, settings } = geology;
  const rows: string[][] = [];
  let depthM = noise.uniform(12, 22);
  for (;;) {
    const setting = settings[Math.floor(depthM / STEP_M)];
    if (!setting) return rows;
    // Dolerite has no fabric and cover no core to orient.
    if (setting.unit !== 'dolerite' && setting.unit !== 'cover') {
      const { type, normal } = chooseStructure(setting, noise);
      const confidence = confidenceFor(geology, noise);
      const { alphaDeg, betaDeg } = coreAngles(
        scattered(normal, confidence, noise),
        hole.path.tangentAt(depthM),
      );
      const beta = Math.round(betaDeg) % 360;
      rows.push([
        hole.id,
        depthM.toFixed(1),
        type,
        alphaDeg.toFixed(0),
        String(beta),
        confidence,
        'bottom',
      ]);
    }
    depthM += spacing(setting) * noise.uniform(0.5, 1.5);
  }
}

export function structureTable(holes: readonly HoleGeology[], noise: Noise): TextTable {
  const header = ['hole_id', 'depth_m', 'type', 'alpha', 'beta', 'confidence', 'reference_line'];
  return { header, rows: holes.flatMap((geology) => readingsOf(geology, noise)) };
}
