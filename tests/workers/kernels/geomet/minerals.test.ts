import { describe, expect, it } from 'vitest';
import { carbonateProxy, CALCIUM_PER_PHOSPHORUS } from '#kernels/geomet/carbonate-proxy.ts';
import {
  atomsOf,
  massFraction,
  MINERAL_CAUTION,
  MINERALS,
  mineralOf,
} from '#kernels/geomet/minerals.ts';
import { sulphideProxies } from '#kernels/geomet/sulphide-proxies.ts';

describe('mineral constants', () => {
  // Computed in python from the 2021 atomic weights: molar mass, then mass % of elements.
  it.each([
    ['pyrite', 119.965, { Fe: 46.5511, S: 53.4489 }],
    ['pyrrhotite', 647.395, { Fe: 60.3828, S: 39.6172 }],
    ['chalcopyrite', 183.511, { Cu: 34.6279, Fe: 30.4314, S: 34.9407 }],
    ['bornite', 501.815, { Cu: 63.3162, Fe: 11.1286, S: 25.5552 }],
    ['chalcocite', 159.152, { Cu: 79.8557 }],
    ['covellite', 95.606, { Cu: 66.4665 }],
    ['enargite', 393.8, { Cu: 48.4099, As: 19.0253, S: 32.5648 }],
    ['arsenopyrite', 162.827, { Fe: 34.2972, As: 46.0131, S: 19.6897 }],
    ['sphalerite', 97.44, { Zn: 67.0977, S: 32.9023 }],
    ['galena', 239.26, { Pb: 86.6004, S: 13.3996 }],
    ['molybdenite', 160.07, { Mo: 59.9425, S: 40.0575 }],
    ['stibnite', 339.7, { Sb: 71.6868, S: 28.3132 }],
    ['calcite', 100.086, { Ca: 40.0436, C: 12.0007 }],
    ['dolomite', 184.399, { Ca: 21.7344, Mg: 13.1807, C: 13.0272 }],
    ['siderite', 115.853, { Fe: 48.2033, C: 10.3674 }],
    ['ankerite', 215.939, { Ca: 18.5599, Fe: 25.8615, C: 11.1244 }],
    ['magnesite', 84.313, { Mg: 28.8271, C: 14.2457 }],
    ['muscovite', 398.302, { K: 9.8162, Al: 20.3224, Si: 21.1536 }],
    ['paragonite', 382.193, { Na: 6.0152, Al: 21.179 }],
    ['K-feldspar', 278.327, { K: 14.0476, Al: 9.6942 }],
    ['albite', 262.218, { Na: 8.7674, Al: 10.2897 }],
    ['anorthite', 278.203, { Ca: 14.406, Al: 19.397 }],
    ['phlogopite', 417.254, { K: 9.3704, Mg: 17.475, Al: 6.4665 }],
    ['annite', 511.874, { K: 7.6383, Fe: 32.7297, Al: 5.2711 }],
    ['clinochlore', 555.789, { Mg: 21.8653, Al: 9.7093 }],
    ['chamosite', 713.489, { Fe: 39.1351, Al: 7.5633 }],
    ['kaolinite', 258.156, { Al: 20.9033, Si: 21.7582 }],
    ['gypsum', 172.164, { S: 18.6218 }],
    ['anhydrite', 136.134, { S: 23.5503 }],
    ['barite', 233.383, { S: 13.7371 }],
    ['alunite', 414.197, { K: 9.4395, Al: 19.5425, S: 15.4806 }],
    ['jarosite', 500.787, { K: 7.8074, Fe: 33.4543, S: 12.8038 }],
    ['magnetite', 231.531, { Fe: 72.3596 }],
    ['hematite', 159.687, { Fe: 69.9431 }],
    ['rutile', 79.865, { Ti: 59.9349 }],
    ['fluorapatite', 504.298, { P: 18.4259 }],
    ['fluorite', 78.075, { F: 48.6672 }],
    ['zircon', 183.305, { Zr: 49.7662 }],
    ['chromite', 223.833, { Cr: 46.4597 }],
    ['cassiterite', 150.708, { Sn: 78.7682 }],
  ] as const)('%s: %d g/mol, %j', (name, molarMass, percents) => {
    expect(MINERALS.get(name)?.molarMass).toBeCloseTo(molarMass, 2);
    for (const [element, percent] of Object.entries(percents)) {
      expect(Math.abs(100 * massFraction(name, element) - percent)).toBeLessThanOrEqual(0.6e-4);
    }
  });

  it('holds whole minerals: mass fractions sum to 1', () => {
    for (const { massFractions } of MINERALS.values()) {
      expect([...massFractions.values()].reduce((sum, share) => sum + share, 0)).toBeCloseTo(1, 12);
    }
  });

  it('counts the atoms of nested formulas and refuses what is none', () => {
    expect(Object.fromEntries(atomsOf('CaSO4(H2O)2'))).toEqual({ Ca: 1, S: 1, O: 6, H: 4 });
    expect(Object.fromEntries(atomsOf('Ca(Mg(CO3)2)2'))).toEqual({ Ca: 1, Mg: 2, C: 4, O: 12 });
    for (const bad of ['', 'Xx2', 'FeS2)', '(FeS2', 'FeS2 ', 'fes2', '2FeS', '()']) {
      expect(() => mineralOf('none', bad)).toThrow(/expected a formula such as CuFeS2/);
    }
    expect(() => massFraction('unobtainium', 'Fe')).toThrow(/expected a mineral such as pyrite/);
    expect(massFraction('pyrite', 'Cu')).toBe(0);
  });

  it('says that it is screening only and leaves the judgement to a person', () => {
    expect(MINERAL_CAUTION).toMatch(/screening only/);
    expect(MINERAL_CAUTION).toMatch(/do not replace, the judgement of a qualified/);
  });
});

describe('sulphides by sequential stoichiometry', () => {
  const worked = { S: 3, Cu: 0.5, As: 0.05, Zn: 0.2, Pb: 0.05, Fe: 6 };

  it('S 3.0 Cu .5 As .05 Zn .2 Pb .05 % (computed in python)', () => {
    const proxies = sulphideProxies(worked);
    // the worked values rest on constants of four decimals
    const isNear = (value: number | undefined, expected: number) =>
      expect(Math.abs((value ?? NaN) - expected)).toBeLessThan(2e-6);
    isNear(proxies?.sulphurLeft, 2.368278);
    isNear(proxies?.ironUsed, 2.539317);
    for (const [mineral, percent] of [
      ['pyrite', 4.430921],
      ['chalcopyrite', 1.443922],
      ['arsenopyrite', 0.108665],
      ['sphalerite', 0.298073],
      ['galena', 0.057736],
    ] as const) {
      isNear(proxies?.minerals.get(mineral), percent);
    }
    expect(proxies).toMatchObject({ sulphurDeficit: 0, sulphurUnplaced: 0, notes: [] });
  });

  it('gives back all sulphur it was given (identity)', () => {
    const proxies = sulphideProxies(
      { ...worked, Mo: 0.1 },
      { copper: { bornite: 0.25, covellite: 0.75 } },
    );
    const sulphur = [...(proxies?.minerals ?? [])].reduce(
      (sum, [mineral, percent]) => sum + percent * massFraction(mineral, 'S'),
      0,
    );
    expect(sulphur).toBeCloseTo(3, 12);
  });

  it('keeps the deficit where metals ask for more sulphur', () => {
    const proxies = sulphideProxies({ S: 0.2, Cu: 1 });
    expect(proxies?.minerals.get('pyrite')).toBe(0);
    expect(proxies?.sulphurDeficit).toBeCloseTo(34.9407 / 34.6279 - 0.2, 4);
    expect(proxies?.notes[0]).toMatch(/too little sulphur/);
  });

  it('caps pyrite by iron and tells of the sulphur left over', () => {
    const proxies = sulphideProxies({ S: 5, Fe: 1 });
    expect(proxies?.minerals.get('pyrite')).toBeCloseTo(1 / 0.465511, 4);
    expect(proxies?.sulphurUnplaced).toBeCloseTo(5 - 53.4489 / 46.5511, 4);
    expect(proxies?.notes[0]).toMatch(/too little iron/);
    expect(sulphideProxies({ S: 1, Cu: 1, Fe: 0.1 })?.notes.at(-1)).toMatch(
      /more iron than there is/,
    );
  });

  it('takes sulphate off first, and barite only from a total barium without it', () => {
    expect(sulphideProxies({ S: 2 }, { sulphateSulphur: 0.5 })?.sulphurLeft).toBeCloseTo(1.5, 12);
    const rock = { S: 2, Ba: 1 };
    expect(sulphideProxies(rock)?.minerals.has('barite')).toBe(false);
    expect(sulphideProxies(rock, { isBariumTotal: true })?.minerals.get('barite')).toBeCloseTo(
      233.383 / 137.327,
      3,
    );
    const both = { isBariumTotal: true, sulphateSulphur: 0.3 };
    expect(sulphideProxies(rock, both)?.minerals.has('barite')).toBe(false);
  });

  it('has no answer without sulphur and refuses bad grades and shares', () => {
    expect(sulphideProxies({ S: null, Cu: 1 })).toBeNull();
    expect(sulphideProxies({ Cu: 1 })).toBeNull();
    for (const S of [-1, NaN, Infinity, 101]) {
      expect(() => sulphideProxies({ S })).toThrow(
        expect.objectContaining({ code: 'bad-parameter' }),
      );
    }
    expect(() => sulphideProxies({ S: 1 }, { copper: { bornite: 0.5 } })).toThrow(/sum to 1/);
    expect(() => sulphideProxies({ S: 1 }, { copper: {} })).toThrow(/found none/);
    expect(() => sulphideProxies({ S: 1 }, { sulphateSulphur: -1 })).toThrow(/sulphate S/);
  });
});

describe('carbonate', () => {
  it('1 % C is 8.3328 % calcite (computed), and apatite takes 2.1566 Ca per P', () => {
    const fromCarbon = carbonateProxy({ C: 1, Ca: 5, P: null, Mg: 0.1 });
    expect(Math.abs((fromCarbon?.calcitePercent ?? NaN) - 8.3328)).toBeLessThan(1e-4);
    expect(fromCarbon).toMatchObject({ kind: 'from-carbon', isMagnesian: false });
    expect(CALCIUM_PER_PHOSPHORUS).toBeCloseTo(2.1566, 4);
  });

  it('is a maximum from calcium alone, after apatite', () => {
    const proxy = carbonateProxy({ C: null, Ca: 2, P: 0.1, Mg: 5 });
    expect(proxy?.kind).toBe('maximum');
    expect(proxy?.calcitePercent).toBeCloseTo((2 - 0.21566) / 0.400436, 3);
    expect(proxy?.isMagnesian).toBe(false);
    expect(carbonateProxy({ C: null, Ca: 0.1, P: 1, Mg: null })?.calcitePercent).toBe(0);
  });

  it('is magnesian above molar Mg/Ca .4 with carbon', () => {
    expect(carbonateProxy({ C: 1, Ca: 4.0078, P: null, Mg: 1 })?.isMagnesian).toBe(true);
    expect(carbonateProxy({ C: 1, Ca: 4.0078, P: null, Mg: 0.97 })?.isMagnesian).toBe(false);
    expect(carbonateProxy({ C: 1, Ca: 0, P: null, Mg: 1 })?.isMagnesian).toBe(false);
  });

  it('has no answer without carbon and calcium, and refuses bad grades', () => {
    expect(carbonateProxy({ C: null, Ca: null, P: 1, Mg: 1 })).toBeNull();
    expect(() => carbonateProxy({ C: NaN, Ca: null, P: null, Mg: null })).toThrow(/C in 0..100/);
  });
});
