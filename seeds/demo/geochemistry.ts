import { ALL_ANALYTES, addTraces, noGrades, traceList } from './analytes.ts';
import type { Grades, TraceList } from './analytes.ts';
import type { Setting } from './geology-model.ts';
import { MINERALS, massFractions } from './minerals.ts';
import type { Mineral } from './minerals.ts';
import type { Noise, Wander } from './noise.ts';
import {
  ALTERED_ANDESITE,
  ANDESITE,
  BASALTIC_ANDESITE,
  COPPER_SULPHIDE,
  COVER,
  DOLERITE,
  MUDSTONE,
  RHYODACITE,
  SERICITIC,
  STRINGER_FAR,
  STRINGER_NEAR,
  ZINC_SULPHIDE,
  blendRecipes,
  withChlorite,
} from './recipes.ts';
import type { Modes, Protolith, Recipe } from './recipes.ts';
import { HOSTED_PPM, PROTOLITH_PPM } from './trace-elements.ts';
import { weather } from './weathering-effect.ts';

/** What the noise of one hole is drawn from. */
export interface HoleNoise {
  noise: Noise;
  wander: Wander;
  /** ln shift of a mineral's content for the whole hole. */
  holeShift: (mineral: Mineral) => number;
}

/** Minerals that alteration leaves alone: little noise, so that their ratios name the first rock. */
const IMMOBILE: ReadonlySet<Mineral> = new Set<Mineral>([
  'rutile',
  'ilmenite',
  'zircon',
  'apatite',
]);
const ORE_MINERALS = ['pyrite', 'chalcopyrite', 'sphalerite', 'galena', 'barite'] as const;
const LARGEST_ORE_SHARE = 0.9;

const LOOSE_TRACES = 'Ag As Au Bi Hg In Mo Re Sb Se Sn Te W'.split(' ');
const FIXED_BY_FORMULA = 'Al Ca Cu Fe K Mg Na P Pb S Ti Zn Zr'.split(' ');

/** Spread of trace contents inside their hosts, ln units. */
const TRACE_SPREAD = ALL_ANALYTES.filter((analyte) => !FIXED_BY_FORMULA.includes(analyte)).map(
  (analyte) => ({ analyte, sigma: LOOSE_TRACES.includes(analyte) ? 0.4 : 0.2 }),
);

const PPM_IN_MINERAL = new Map<Mineral, TraceList>(
  MINERALS.map((mineral) => [
    mineral,
    [...traceList(massFractions(mineral), 1e6), ...traceList(HOSTED_PPM[mineral] ?? {})],
  ]),
);

const PPM_IN_PROTOLITH: Record<Protolith, TraceList> = {
  andesite: traceList(PROTOLITH_PPM.andesite),
  rhyodacite: traceList(PROTOLITH_PPM.rhyodacite),
  dolerite: traceList(PROTOLITH_PPM.dolerite),
  mudstone: traceList(PROTOLITH_PPM.mudstone),
};

const PLAIN_RECIPES = {
  cover: COVER,
  mudstone: MUDSTONE,
  dolerite: DOLERITE,
  'zinc sulphide': ZINC_SULPHIDE,
  'copper sulphide': COPPER_SULPHIDE,
} as const;

function recipeOf(setting: Setting): Recipe {
  const { unit, sericite, chlorite, basaltic, roofAlteration, semiMassive } = setting;
  if (unit === 'andesite') {
    return blendRecipes(
      blendRecipes(ANDESITE, BASALTIC_ANDESITE, basaltic),
      ALTERED_ANDESITE,
      roofAlteration,
    );
  }
  if (unit === 'rhyodacite' || unit === 'sericitic rhyodacite') {
    return withChlorite(blendRecipes(RHYODACITE, SERICITIC, sericite), chlorite);
  }
  if (unit !== 'chlorite stringer') return PLAIN_RECIPES[unit];
  const ore = setting.block === 'south' ? STRINGER_NEAR : STRINGER_FAR;
  const stringer = withChlorite({ ...ore, gangue: SERICITIC.gangue }, chlorite);
  return blendRecipes(stringer, COPPER_SULPHIDE, semiMassive);
}

/** Ore minerals first, each lognormal about its median; the gangue shares the rest. Fractions of 1. */
function drawModes(recipe: Recipe, { noise, wander, holeShift }: HoleNoise): Modes {
  const modes: Modes = {};
  let ore = 0;
  for (const mineral of ORE_MINERALS) {
    const sigma = recipe.oreSigma[mineral] ?? 0;
    const z = 0.94 * wander.value(mineral) + 0.34 * noise.normal() + holeShift(mineral);
    const share = ((recipe.ore[mineral] ?? 0) / 100) * Math.exp(sigma * z);
    modes[mineral] = share;
    ore += share;
  }
  if (ore > LARGEST_ORE_SHARE) {
    // Pyrite gives way: a laboratory cannot find more than the whole rock.
    const pyrite = modes.pyrite ?? 0;
    const kept = Math.max(0.05, pyrite - (ore - LARGEST_ORE_SHARE));
    modes.pyrite = kept;
    ore += kept - pyrite;
  }
  const weights: Modes = {};
  let total = 0;
  for (const mineral of MINERALS) {
    const weight = recipe.gangue[mineral];
    if (weight === undefined) continue;
    const sigma = IMMOBILE.has(mineral) ? 0.06 : recipe.gangueSigma;
    const z = 0.8 * wander.value(mineral) + 0.6 * noise.normal();
    weights[mineral] = weight * Math.exp(sigma * z);
    total += weights[mineral];
  }
  const left = Math.max(0.02, 1 - ore);
  for (const mineral of MINERALS) {
    const weight = weights[mineral];
    if (weight !== undefined) modes[mineral] = (modes[mineral] ?? 0) + (weight / total) * left;
  }
  return modes;
}

/** Arsenic, antimony, mercury and thallium along the early fault, whatever rock it cuts. */
function addHalo(grades: Grades, setting: Setting, noise: Noise): void {
  const strength = Math.exp(-setting.earlyFaultM / 13);
  if (strength < 0.01) return;
  grades.As += 190 * strength * noise.lognormal(0.5);
  grades.Sb += 16 * strength * noise.lognormal(0.5);
  grades.Hg += 1.1 * strength * noise.lognormal(0.6);
  grades.Tl += 0.5 * strength * noise.lognormal(0.5);
}

/** True composition of one rock portion, ppm. */
export function compositionOf(setting: Setting, from: HoleNoise): Grades {
  const recipe = recipeOf(setting);
  const modes = drawModes(recipe, from);
  const grades = noGrades();
  let ore = 0;
  for (const mineral of MINERALS) {
    const share = modes[mineral];
    const ppm = PPM_IN_MINERAL.get(mineral);
    if (share !== undefined && ppm) addTraces(grades, ppm, share);
  }
  for (const mineral of ORE_MINERALS) ore += modes[mineral] ?? 0;
  addTraces(grades, PPM_IN_PROTOLITH[recipe.protolith], recipe.hostShare * Math.max(0.02, 1 - ore));
  for (const { analyte, sigma } of TRACE_SPREAD) grades[analyte] *= from.noise.lognormal(sigma);
  addHalo(grades, setting, from.noise);
  weather(grades, setting, from.noise);
  return grades;
}
