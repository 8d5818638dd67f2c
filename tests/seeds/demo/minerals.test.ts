import { describe, expect, it } from 'vitest';
import { MINERALS, massFractions } from '#seeds/demo/minerals.ts';

describe('mass fractions of the pure minerals', () => {
  // Ideal compositions as mineral handbooks print them (Anthony et al., Handbook of Mineralogy;
  // from memory), mass %.
  it.each([
    ['pyrite', { Fe: 46.55, S: 53.45 }],
    ['chalcopyrite', { Cu: 34.63, Fe: 30.43, S: 34.94 }],
    ['sphalerite', { Zn: 67.1, S: 32.9 }],
    ['galena', { Pb: 86.6, S: 13.4 }],
    ['calcite', { Ca: 40.04 }],
    ['barite', { Ba: 58.84, S: 13.74 }],
    ['albite', { Na: 8.77, Al: 10.29 }],
    ['muscovite', { K: 9.82, Al: 20.32 }],
    ['zircon', { Zr: 49.77 }],
  ] as const)('%s holds %j', (mineral, percents) => {
    const fractions = massFractions(mineral);
    for (const [element, percent] of Object.entries(percents)) {
      expect(100 * (fractions[element as keyof typeof fractions] ?? 0)).toBeCloseTo(percent, 1);
    }
    expect(Object.keys(fractions).sort()).toEqual(Object.keys(percents).sort());
  });

  it('never passes the whole mineral, and quartz holds nothing that is assayed', () => {
    for (const mineral of MINERALS) {
      const total = Object.values(massFractions(mineral)).reduce((sum, part) => sum + part, 0);
      expect(total).toBeLessThanOrEqual(1 + 1e-12);
    }
    expect(massFractions('quartz')).toEqual({});
  });
});
