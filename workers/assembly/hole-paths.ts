import { KernelError } from '#kernels/kernel-error.ts';
import { desurvey, type Station } from '#kernels/geometry/minimum-curvature.ts';
import type { HolePath } from '#kernels/geometry/hole-path.ts';
import { rowsByHole, type LoadedTable } from './read-rows.ts';

export interface SurveyedHole {
  name: string;
  collar: [number, number, number];
  lengthM: number;
  campaign: string | null;
  stations: Station[];
  path: HolePath;
  notes: string[];
}

/** A hole nobody surveyed is taken as vertical, and said so. */
const VERTICAL: Station = { depthM: 0, azimuth: 0, dip: -90 };

function stationsOf(survey: LoadedTable | null): Map<string, Station[]> {
  if (!survey) return new Map();
  const [depth, azimuth, dip] = [survey.numbers('depth'), survey.numbers('azimuth'), survey.numbers('dip')];
  const byHole = new Map<string, Station[]>();
  for (const [hole, { first, count }] of rowsByHole(survey.texts('hole'))) {
    byHole.set(hole, Array.from({ length: count }, (_, i) => ({ depthM: depth[first + i] ?? 0, azimuth: azimuth[first + i] ?? 0, dip: dip[first + i] ?? -90 })));
  }
  return byHole;
}

/** Collars and surveys joined: the path of each hole, in the order of hole names. */
export function surveyedHoles(collar: LoadedTable, survey: LoadedTable | null): SurveyedHole[] {
  const stationsByHole = stationsOf(survey);
  const [x, y, z, length] = [collar.numbers('x'), collar.numbers('y'), collar.numbers('z'), collar.numbers('length')];
  const campaigns = collar.texts('campaign');
  return collar.texts('hole').map((name, row) => {
    const surveyed = stationsByHole.get(name);
    const stations = surveyed ?? [VERTICAL];
    const start: [number, number, number] = [x[row] ?? 0, y[row] ?? 0, z[row] ?? 0];
    const lengthM = length[row] ?? 0;
    const { path, notes } = pathOf(start, stations, lengthM);
    if (!surveyed) notes.unshift('No survey: taken as vertical.');
    return { name, collar: start, lengthM, campaign: campaigns[row] || null, stations, path, notes };
  });
}

/** One impossible station must not stop all other holes: that hole goes straight, and says why. */
function pathOf(start: [number, number, number], stations: Station[], lengthM: number): { path: HolePath; notes: string[] } {
  try {
    const path = desurvey(start, stations, { lengthM });
    return { path, notes: path.notes.map(({ message }) => message) };
  } catch (error) {
    if (!(error instanceof KernelError)) throw error;
    const path = desurvey(start, [stations[0] ?? VERTICAL], { lengthM });
    return { path, notes: [`Survey not usable (${error.message}): taken as straight along its first station.`] };
  }
}
