import type { Traces } from './analytes.ts';
import type { Mineral } from './minerals.ts';
import type { Protolith } from './recipes.ts';

/** Trace elements that each mineral carries, ppm in the pure mineral; plausible, made up. */
// prettier-ignore
export const HOSTED_PPM: Partial<Record<Mineral, Traces>> = {
  sphalerite: { Cd: 2600, In: 45, Hg: 60, Ga: 22, Ge: 12, Ag: 25, Mn: 900, Co: 12, Sn: 20, Se: 15 },
  galena: { Ag: 900, Bi: 60, Sb: 900, Se: 60, Tl: 30, Te: 20, Au: 18 },
  chalcopyrite: { Ag: 80, Bi: 60, Se: 180, Te: 22, In: 35, Sn: 70, Co: 60, Au: 6 },
  pyrite: { Co: 260, Ni: 70, As: 500, Se: 40, Te: 6, Bi: 7, Tl: 3, Mo: 16, Sb: 14, Ag: 2, Au: 0.35, Re: 0.01 },
  muscovite: { Rb: 340, Cs: 8, Ba: 2200, Tl: 2, Li: 30, Ga: 70, Sn: 8, W: 5, V: 120, Be: 4 },
  'K-feldspar': { Rb: 250, Ba: 2500, Cs: 2, Tl: 1, Pb: 35, Sr: 150 },
  albite: { Sr: 250, Ba: 120, Ga: 22, Be: 2.5, Pb: 8 },
  anorthite: { Sr: 700, Ba: 100, Ga: 20 },
  clinochlore: { Zn: 420, Mn: 3300, Li: 95, Co: 60, Ni: 110, Ga: 40, V: 180, Sc: 12, Cs: 0.4 },
  chamosite: { Zn: 700, Mn: 4300, Li: 60, Co: 80, Ni: 90, Ga: 48, V: 200, Sc: 12, Cs: 0.4 },
  epidote: { Sr: 1500, Ga: 45, Pb: 20, La: 30, Ce: 60, Y: 22 },
  calcite: { Sr: 400, Mn: 3000, Y: 15 },
  dolomite: { Sr: 250, Mn: 6000, Y: 8 },
  magnetite: { V: 1500, Cr: 200, Ni: 60, Zn: 200, Ga: 30, Co: 60 },
  ilmenite: { Nb: 55, Ta: 4, V: 300, Mn: 8000, Sc: 30 },
  rutile: { Nb: 900, Ta: 60, W: 45, Sn: 50, Sb: 20, V: 700 },
  apatite: { Y: 400, La: 400, Ce: 900, Sr: 300, U: 10, Th: 15 },
  zircon: { Hf: 12000, U: 300, Th: 200, Y: 1200 },
  barite: { Sr: 8000 },
  diopside: { Cr: 1100, Sc: 95, V: 300, Ni: 150, Co: 40 },
  actinolite: { Cr: 160, Sc: 40, V: 200, Ni: 60, Co: 40, Zn: 120 },
  goethite: { As: 300, V: 500, Mo: 20, Pb: 150, Zn: 400, Cu: 250, Sb: 15 },
  kaolinite: { Ga: 40, Li: 30 },
};

/** Trace elements of each first rock not tied to one mineral here, ppm; plausible, made up. */
// prettier-ignore
export const PROTOLITH_PPM: Record<Protolith, Traces> = {
  andesite: {
    Nb: 4, Ta: 0.3, Th: 2.4, U: 0.8, La: 10, Ce: 21, Y: 17, Sc: 14, V: 90, Cr: 42, Ni: 20, Co: 9, Mo: 0.8,
    W: 0.5, Sn: 1, Be: 0.8, Li: 8, As: 4, Sb: 0.4, Hg: 0.012, Bi: 0.06, Cs: 0.6, Ga: 5, Ge: 1.3, Cu: 35,
    Zn: 30, Pb: 4, Ag: 0.06, Au: 0.002, Te: 0.02, Se: 0.12, Tl: 0.06, In: 0.05, Cd: 0.09, Mn: 300, Hf: 0.3,
  },
  rhyodacite: {
    Nb: 8, Ta: 0.7, Th: 8.5, U: 2.3, La: 24, Ce: 48, Y: 25, Sc: 5, V: 10, Cr: 5, Ni: 2.5, Co: 1.2, Mo: 1.3,
    W: 1.2, Sn: 2, Be: 1.2, Li: 6, As: 3, Sb: 0.4, Hg: 0.012, Bi: 0.09, Cs: 0.8, Ga: 4, Ge: 1.1, Cu: 14,
    Zn: 28, Pb: 7, Ag: 0.06, Au: 0.002, Te: 0.025, Se: 0.12, Tl: 0.1, In: 0.03, Cd: 0.08, Mn: 180, Hf: 0.5,
  },
  dolerite: {
    Nb: 3, Ta: 0.2, Th: 0.7, U: 0.2, La: 5, Ce: 12, Y: 18, Sc: 12, V: 130, Cr: 150, Ni: 95, Co: 28, Mo: 0.5,
    W: 0.3, Sn: 0.9, Be: 0.4, Li: 9, As: 1.2, Sb: 0.15, Hg: 0.006, Bi: 0.02, Cs: 0.4, Ga: 8, Ge: 1.5, Cu: 85,
    Zn: 55, Pb: 1.8, Ag: 0.05, Au: 0.002, Te: 0.01, Se: 0.15, Tl: 0.03, In: 0.06, Cd: 0.1, Mn: 600, Hf: 0.2,
  },
  mudstone: {
    Nb: 10, Ta: 0.8, Th: 8, U: 4, La: 26, Ce: 52, Y: 21, Sc: 11, V: 120, Cr: 60, Ni: 38, Co: 12, Mo: 6,
    W: 1.5, Sn: 2.4, Be: 1.6, Li: 20, As: 22, Sb: 1.8, Hg: 0.07, Bi: 0.25, Cs: 1.5, Ga: 6, Ge: 1.4, Cu: 45,
    Zn: 80, Pb: 14, Ag: 0.2, Au: 0.004, Te: 0.05, Se: 1, Tl: 0.3, In: 0.05, Cd: 0.3, Mn: 350, Re: 0.004, Hf: 0.6,
  },
};
