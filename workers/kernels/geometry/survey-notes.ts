import { toDegrees } from './directions.ts';
import type { HolePath, SurveyNote } from './hole-path.ts';
import type { Station } from './minimum-curvature.ts';

interface Limits {
  startDepthM: number;
  lengthM: number | undefined;
  doglegLimitPer30M: number;
}

/** Azimuth jump that looks magnetic when the dip stays, degrees per 30 m (common practice). */
const AZIMUTH_JUMP_PER_30_M = 10;
/** Change of dip below which the dip counts as steady, degrees. */
const STEADY_DIP = 1;

/** What was assumed or looks wrong in a survey. */
export function surveyNotes(
  given: readonly Station[],
  used: readonly Station[],
  path: HolePath,
  { startDepthM, lengthM, doglegLimitPer30M }: Limits,
): SurveyNote[] {
  const notes: SurveyNote[] = [];
  const firstGiven = given.reduce((least, { depthM }) => Math.min(least, depthM), Infinity);
  if (firstGiven > startDepthM) {
    notes.push({
      code: 'first-station-copied',
      message: `the first station is at ${firstGiven} m: its direction was copied to ${startDepthM} m`,
      depthM: firstGiven,
    });
  }
  const seen = new Set<number>();
  for (const { depthM } of given) {
    if (seen.has(depthM)) {
      const message = `more than one station at ${depthM} m: the last given was used`;
      notes.push({ code: 'duplicate-depth', message, depthM });
    }
    seen.add(depthM);
  }
  used.forEach((_, leg) => notes.push(...legNotes(used, path, leg, doglegLimitPer30M)));
  const last = path.depthsM[path.depthsM.length - 1]!;
  if (lengthM !== undefined && lengthM > last) {
    const message = `the last station is at ${last} m: extended straight to ${lengthM} m`;
    notes.push({ code: 'extended-straight', message, depthM: last });
  }
  return notes;
}

function legNotes(
  stations: readonly Station[],
  path: HolePath,
  leg: number,
  limit: number,
): SurveyNote[] {
  const [top, bottom] = [stations[leg], stations[leg + 1]];
  if (!top || !bottom) return [];
  const notes: SurveyNote[] = [];
  const per30 = 30 / (bottom.depthM - top.depthM);
  const turn = toDegrees(path.doglegsRad[leg]!);
  const where = { depthM: bottom.depthM };
  if (turn * per30 > limit) {
    const message = `turns ${turn.toFixed(1)}° between ${top.depthM} and ${bottom.depthM} m, more than ${limit}° per 30 m`;
    notes.push({ code: 'dogleg', message, ...where });
  }
  const jump = Math.abs(((((bottom.azimuth - top.azimuth) % 360) + 540) % 360) - 180);
  const isSteep = Math.max(Math.abs(top.dip), Math.abs(bottom.dip)) > 85;
  const isSteady = Math.abs(bottom.dip - top.dip) <= STEADY_DIP;
  if (jump * per30 > AZIMUTH_JUMP_PER_30_M && isSteady && !isSteep) {
    const message = `azimuth jumps ${jump.toFixed(1)}° between ${top.depthM} and ${bottom.depthM} m with a steady dip: magnetic ground?`;
    notes.push({ code: 'magnetic-disturbance', message, ...where });
  }
  return notes;
}
