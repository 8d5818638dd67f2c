import { MINERALS } from './minerals.ts';
import type { Mineral } from './minerals.ts';

export type Modes = Partial<Record<Mineral, number>>;
export type Protolith = 'andesite' | 'rhyodacite' | 'dolerite' | 'mudstone';

/** What a rock is made of before noise. */
export interface Recipe {
  /** Relative weights of the minerals that share what the sulphides leave. */
  gangue: Modes;
  /** Medians of the ore minerals, mass % of the whole rock, and their spread in ln units. */
  ore: Modes;
  oreSigma: Modes;
  /** Share of the gangue that is still the first rock, which carries the immobile traces. */
  hostShare: number;
  protolith: Protolith;
  gangueSigma: number;
}

const BARREN_SIGMA: Modes = {
  pyrite: 0.45,
  chalcopyrite: 0.5,
  sphalerite: 0.5,
  galena: 0.5,
  barite: 0.4,
};

export const ANDESITE: Recipe = {
  // prettier-ignore
  gangue: {
    quartz: 11, albite: 30, anorthite: 13, clinochlore: 8, chamosite: 6.5, actinolite: 11, epidote: 7,
    'K-feldspar': 4.5, calcite: 2.6, magnetite: 2, ilmenite: 1.25, apatite: 0.32, muscovite: 2.4, zircon: 0.021,
  },
  ore: { pyrite: 0.4, chalcopyrite: 0.008, sphalerite: 0.006, galena: 0.0006 },
  oreSigma: BARREN_SIGMA,
  hostShare: 1,
  protolith: 'andesite',
  gangueSigma: 0.36,
};

/** The more basaltic flows: less feldspar, more pyroxene and amphibole. */
export const BASALTIC_ANDESITE: Recipe = {
  ...ANDESITE,
  // prettier-ignore
  gangue: {
    quartz: 5, albite: 21, anorthite: 20, clinochlore: 10, chamosite: 5.5, actinolite: 14, diopside: 12, epidote: 5,
    'K-feldspar': 2, calcite: 2.2, magnetite: 2.3, ilmenite: 2, apatite: 0.34, muscovite: 1.1, zircon: 0.019,
  },
};

/** Andesite above the lens: feldspar and amphibole gone to white mica, chlorite and carbonate. */
export const ALTERED_ANDESITE: Recipe = {
  ...ANDESITE,
  // prettier-ignore
  gangue: {
    quartz: 18, albite: 16, anorthite: 2, clinochlore: 17, chamosite: 12, actinolite: 2, epidote: 5,
    'K-feldspar': 2, calcite: 4, magnetite: 0.8, ilmenite: 1.2, apatite: 0.3, muscovite: 18, zircon: 0.02,
  },
  ore: { pyrite: 2.4, chalcopyrite: 0.02, sphalerite: 0.09, galena: 0.006, barite: 0.03 },
};

export const RHYODACITE: Recipe = {
  // prettier-ignore
  gangue: {
    quartz: 38, albite: 27, 'K-feldspar': 12, muscovite: 13, clinochlore: 2.4, chamosite: 2.4, calcite: 1,
    rutile: 0.36, apatite: 0.1, zircon: 0.042, magnetite: 0.5, epidote: 0.8,
  },
  ore: { pyrite: 1, chalcopyrite: 0.02, sphalerite: 0.018, galena: 0.002 },
  oreSigma: BARREN_SIGMA,
  hostShare: 1,
  protolith: 'rhyodacite',
  gangueSigma: 0.36,
};

export const SERICITIC: Recipe = {
  // prettier-ignore
  gangue: {
    quartz: 44, albite: 9, 'K-feldspar': 6, muscovite: 32, clinochlore: 4, chamosite: 3, calcite: 0.7,
    rutile: 0.36, apatite: 0.1, zircon: 0.042, magnetite: 0.2, epidote: 0.3,
  },
  ore: { pyrite: 3.4, chalcopyrite: 0.06, sphalerite: 0.04, galena: 0.004 },
  oreSigma: BARREN_SIGMA,
  hostShare: 0.95,
  protolith: 'rhyodacite',
  gangueSigma: 0.36,
};

// prettier-ignore
const STRINGER_GANGUE: Modes = {
  quartz: 33, muscovite: 5, clinochlore: 27, chamosite: 20, calcite: 0.7, rutile: 0.33, apatite: 0.12,
  zircon: 0.036, magnetite: 0.8, albite: 0.5, 'K-feldspar': 0.25, dolomite: 0.3,
};
const STRINGER_SIGMA: Modes = { pyrite: 0.4, chalcopyrite: 0.42, sphalerite: 0.45, galena: 0.45 };

/** Turns a footwall rock's gangue towards that of the stringer zone; the ore minerals stay. */
export const withChlorite = (recipe: Recipe, share: number): Recipe => ({
  ...recipe,
  gangue: blendRecipes(recipe, { ...recipe, gangue: STRINGER_GANGUE }, share).gangue,
});

/** South block: the part of the stringer zone above the feeder. */
export const STRINGER_NEAR: Recipe = {
  gangue: STRINGER_GANGUE,
  ore: { pyrite: 12, chalcopyrite: 4, sphalerite: 0.25, galena: 0.01 },
  oreSigma: STRINGER_SIGMA,
  hostShare: 0.8,
  protolith: 'rhyodacite',
  gangueSigma: 0.36,
};

/** North block: the part that lay away from the feeder before the late fault moved. */
export const STRINGER_FAR: Recipe = {
  ...STRINGER_NEAR,
  ore: { pyrite: 11, chalcopyrite: 0.72, sphalerite: 0.25, galena: 0.01 },
};

const MASSIVE_SIGMA: Modes = {
  pyrite: 0.14,
  chalcopyrite: 0.32,
  sphalerite: 0.32,
  galena: 0.4,
  barite: 0.4,
};

export const ZINC_SULPHIDE: Recipe = {
  // prettier-ignore
  gangue: {
    quartz: 42, muscovite: 12, clinochlore: 9, chamosite: 4, dolomite: 18, calcite: 8, rutile: 0.12,
    apatite: 0.12, zircon: 0.012, 'K-feldspar': 0.4, albite: 0.4,
  },
  ore: { pyrite: 44, chalcopyrite: 0.9, sphalerite: 13, galena: 1.5, barite: 2.6 },
  oreSigma: MASSIVE_SIGMA,
  hostShare: 0.35,
  protolith: 'rhyodacite',
  gangueSigma: 0.36,
};

export const COPPER_SULPHIDE: Recipe = {
  // prettier-ignore
  gangue: {
    quartz: 40, chamosite: 20, clinochlore: 13, magnetite: 14, muscovite: 2.5, dolomite: 3, calcite: 1.5,
    rutile: 0.12, apatite: 0.12, zircon: 0.012, 'K-feldspar': 0.12, albite: 0.25,
  },
  ore: { pyrite: 56, chalcopyrite: 7.5, sphalerite: 1, galena: 0.05, barite: 0.02 },
  oreSigma: MASSIVE_SIGMA,
  hostShare: 0.35,
  protolith: 'rhyodacite',
  gangueSigma: 0.36,
};

export const DOLERITE: Recipe = {
  // prettier-ignore
  gangue: {
    diopside: 26, anorthite: 25, albite: 15, actinolite: 10, clinochlore: 8, chamosite: 4, ilmenite: 3.2,
    magnetite: 2.2, apatite: 0.38, calcite: 1.2, quartz: 2, zircon: 0.018, 'K-feldspar': 1, muscovite: 0.5,
  },
  ore: { pyrite: 0.22, chalcopyrite: 0.006, sphalerite: 0.004, galena: 0.0003 },
  oreSigma: BARREN_SIGMA,
  hostShare: 1,
  protolith: 'dolerite',
  gangueSigma: 0.26,
};

export const MUDSTONE: Recipe = {
  // prettier-ignore
  gangue: {
    quartz: 32, muscovite: 20, clinochlore: 9, chamosite: 9, albite: 14, 'K-feldspar': 4, calcite: 2.5,
    rutile: 0.7, apatite: 0.3, zircon: 0.03, epidote: 2, kaolinite: 2,
  },
  ore: { pyrite: 2.2, chalcopyrite: 0.02, sphalerite: 0.05, galena: 0.008 },
  oreSigma: BARREN_SIGMA,
  hostShare: 1,
  protolith: 'mudstone',
  gangueSigma: 0.36,
};

export const COVER: Recipe = {
  // prettier-ignore
  gangue: {
    quartz: 30, kaolinite: 22, albite: 12, muscovite: 6, clinochlore: 6, chamosite: 4, goethite: 6, epidote: 4,
    'K-feldspar': 4, calcite: 0.8, ilmenite: 1.1, rutile: 0.1, apatite: 0.2, zircon: 0.022, magnetite: 1,
    anorthite: 2,
  },
  ore: { pyrite: 0.1, chalcopyrite: 0.006, sphalerite: 0.004, galena: 0.001 },
  oreSigma: BARREN_SIGMA,
  hostShare: 1,
  protolith: 'andesite',
  gangueSigma: 0.36,
};

/** A rock part of the way from one recipe to another; ore medians move on a log scale. */
export function blendRecipes(from: Recipe, to: Recipe, share: number): Recipe {
  if (share <= 0) return from;
  if (share >= 1) return to;
  const linear = (a: number, b: number): number => a + (b - a) * share;
  const logarithmic = (a: number, b: number): number =>
    Math.exp(linear(Math.log(Math.max(a, 1e-4)), Math.log(Math.max(b, 1e-4))));
  return {
    gangue: blendModes(from.gangue, to.gangue, linear),
    ore: blendModes(from.ore, to.ore, logarithmic),
    oreSigma: blendModes(from.oreSigma, to.oreSigma, linear),
    hostShare: linear(from.hostShare, to.hostShare),
    protolith: share < 0.5 ? from.protolith : to.protolith,
    gangueSigma: linear(from.gangueSigma, to.gangueSigma),
  };
}

function blendModes(from: Modes, to: Modes, mix: (a: number, b: number) => number): Modes {
  const out: Modes = { ...from, ...to };
  for (const mineral of MINERALS) {
    if (out[mineral] !== undefined) out[mineral] = mix(from[mineral] ?? 0, to[mineral] ?? 0);
  }
  return out;
}
