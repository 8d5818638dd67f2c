import type { Grades, Traces } from './analytes.ts';
import { traceList } from './analytes.ts';
import type { Setting } from './geology-model.ts';
import type { Noise } from './noise.ts';

/** Share of each element that complete oxidation keeps; elements not named stay. */
// prettier-ignore
const KEPT_IN_OXIDE: Traces = {
  S: 0.22, Zn: 0.5, Cd: 0.42, Na: 0.5, Ca: 0.5, Sr: 0.6, Mg: 0.8, Mn: 0.8, Cu: 0.65, Co: 0.75, Ni: 0.85,
  K: 0.92, Rb: 0.95, Ag: 0.7, Se: 0.6, Tl: 0.8,
};

const KEPT = traceList(KEPT_IN_OXIDE).map(({ analyte, ppm }) => ({ analyte, kept: ppm }));

/** Copper taken from above settles a little below the oxide. */
const TRANSITIONAL_COPPER = 1.15;

/** Leaches a composition in place by how weathered the ground is. */
export function weather(grades: Grades, setting: Setting, noise: Noise): void {
  if (setting.weathering === 'fresh') return;
  const strength = (setting.weathering === 'oxide' ? 1 : 0.35) * noise.uniform(0.75, 1.1);
  for (const { analyte, kept } of KEPT) grades[analyte] *= kept ** strength;
  if (setting.weathering === 'transitional') grades.Cu *= TRANSITIONAL_COPPER;
}
