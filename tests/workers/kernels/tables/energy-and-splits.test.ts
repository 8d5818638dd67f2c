import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { seededRandom } from '#kernels/random.ts';
import { categoryFrom } from '#kernels/tables/category.ts';
import { domainSplitReport } from '#kernels/tables/domain-split-report.ts';
import { energyDistance, energyTest } from '#kernels/tables/energy-distance.ts';

const column = (...values: number[]) => [Float64Array.from(values)];

describe('energy distance', () => {
  it('0, 1, 2 against 3, 5: 2 x 3 - .888889 - 1 = 4.111111 (computed)', () => {
    expect(energyDistance(column(0, 1, 2), column(3, 5))).toBeCloseTo(4.111111, 6);
  });

  it('is half the squared distance of distribution functions: 2 ∫(F - G)² on a line (Székely & Rizzo)', () => {
    // F - G of 0,1,2 and 3,5: 1/3 on [0,1), 2/3 on [1,2), 1 on [2,3), 1/2 on [3,5)
    const integral = 1 / 9 + 4 / 9 + 1 + 2 / 4;
    expect(energyDistance(column(0, 1, 2), column(3, 5))).toBeCloseTo(2 * integral, 12);
  });

  it('is 0 for the same points, symmetric, and blind to shifts and turns', () => {
    const point = fc.tuple(fc.integer({ min: -20, max: 20 }), fc.integer({ min: -20, max: 20 }));
    const points = fc.array(point, { minLength: 1, maxLength: 12 });
    fc.assert(
      fc.property(points, points, (a, b) => {
        const columns = (list: typeof a, turn: (p: (typeof a)[number]) => [number, number]) =>
          [0, 1].map((k) => Float64Array.from(list, (p) => turn(p)[k]!));
        const still = (p: [number, number]): [number, number] => p;
        const turned = ([x, y]: [number, number]): [number, number] => [
          0.6 * x - 0.8 * y + 7,
          0.8 * x + 0.6 * y - 3,
        ];
        const distance = energyDistance(columns(a, still), columns(b, still));
        expect(distance).toBeGreaterThanOrEqual(-1e-9);
        expect(energyDistance(columns(b, still), columns(a, still))).toBeCloseTo(distance, 9);
        expect(energyDistance(columns(a, turned), columns(b, turned))).toBeCloseTo(distance, 8);
        expect(energyDistance(columns(a, still), columns(a, still))).toBeCloseTo(0, 9);
      }),
    );
  });
});

/** 12 holes of 20 rows in runs of 5: rock A and B in turn, B richer by `step`. */
function rows(step: number) {
  const random = seededRandom(3);
  const n = 240;
  const isB = Array.from(
    { length: n },
    (_, i) => Math.floor(i / 5 + (Math.floor(i / 20) % 3)) % 2 === 1,
  );
  const values = Float64Array.from(isB, (b) => (b ? step : 0) + random.normal());
  const holeStarts = Int32Array.from({ length: 13 }, (_, hole) => 20 * hole);
  return { n, isB, values, holeStarts };
}

describe('energy test', () => {
  const labels = (isB: boolean[]) => Int8Array.from(isB, (b) => (b ? 0 : 1));

  it('tells codes apart that differ and not those that do not', () => {
    const apart = rows(2);
    expect(
      energyTest([apart.values], labels(apart.isB), apart.holeStarts, { seed: 1, draws: 99 }).p,
    ).toBe(0.01);
    const alike = rows(0);
    expect(
      energyTest([alike.values], labels(alike.isB), alike.holeStarts, { seed: 1, draws: 99 }).p,
    ).toBeGreaterThan(0.05);
  });

  it('says nothing of codes that never share a hole', () => {
    const { values, holeStarts } = rows(5);
    const byHole = Int8Array.from(values, (_, i) => (i < 120 ? 1 : 0));
    expect(energyTest([values], byHole, holeStarts, { seed: 1, draws: 19 }).p).toBe(1);
  });

  it('thins at equal steps and gives the distance of the points used', () => {
    const { values, isB, holeStarts } = rows(2);
    const thin = energyTest([values], labels(isB), holeStarts, { seed: 1, draws: 1, maxRows: 40 });
    expect(thin.used).toEqual({ first: 40, second: 40 });
    const whole = energyTest([values], labels(isB), holeStarts, { seed: 1, draws: 1 });
    const pick = (b: boolean) => [values.filter((_, i) => isB[i] === b)];
    expect(whole.distance).toBeCloseTo(energyDistance(pick(false), pick(true)), 10);
  });
});

describe('how domains divide', () => {
  const { n, isB, values, holeStarts } = rows(3);
  const lithology = categoryFrom(isB.map((b, i) => (i === 0 ? null : b ? 'vein' : 'tuff')));
  const report = (domains: (string | null)[], coordinates = [values]) =>
    domainSplitReport(
      {
        domains: categoryFrom(domains),
        lithology,
        lengthsM: new Float64Array(n).fill(2),
        coordinates,
        holeStarts,
      },
      { seed: 1, draws: 99 },
    );

  it('proposes to split a domain of two rocks that differ', () => {
    const [domain] = report(Array.from({ length: n }, () => 'D')).domains;
    expect(domain).toMatchObject({
      domain: 'D',
      metres: 480,
      notLoggedMetres: 2,
      proposesSplit: true,
    });
    expect(domain?.lithologies.reduce((sum, { share }) => sum + share, 0)).toBeCloseTo(1, 12);
    expect(domain?.lithologies.reduce((sum, { metres }) => sum + metres, 2)).toBe(480);
    expect(domain?.entropy).toBeCloseTo(Math.LN2, 3);
  });

  it('does not propose it where the rocks are alike', () => {
    const [domain] = report(
      Array.from({ length: n }, () => 'D'),
      [rows(0).values],
    ).domains;
    expect(domain?.twoRocks).not.toBeNull();
    expect(domain?.proposesSplit).toBe(false);
  });

  it('proposes to merge domains of one rock that lie close, and no others', () => {
    const thirds = isB.map((b, i) => (b ? 'V' : i % 2 ? 'T1' : 'T2'));
    const { domains, merges } = report(thirds);
    expect(domains.map(({ twoRocks }) => twoRocks)).toEqual([null, null, null]);
    expect(merges).toHaveLength(1);
    expect(merges[0]).toMatchObject({ first: 'T1', second: 'T2', lithology: 'tuff' });
    expect(merges[0]?.withinSd).toBeGreaterThan(merges[0]?.distance ?? NaN);
  });

  it('copes with rows outside every domain', () => {
    expect(
      report(Array.from({ length: n }, (_, i) => (i < 20 ? 'D' : null))).domains[0]?.metres,
    ).toBe(40);
  });
});

const starts = Int32Array.of(0, 3);
const codes = Int8Array.of(1, 0, -1);
const abc = categoryFrom(['a', 'b', 'c']);
const base = {
  domains: abc,
  lithology: abc,
  lengthsM: new Float64Array(3),
  coordinates: column(1, 2, 3),
  holeStarts: starts,
};
it.each([
  ['shape', () => energyDistance([], [])],
  ['shape', () => energyDistance(column(1), [...column(1), ...column(2)])],
  ['too-few-rows', () => energyDistance(column(), column(1))],
  ['not-finite', () => energyDistance(column(1, NaN), column(1))],
  ['shape', () => energyTest(column(1, 2), codes, starts, { seed: 1 })],
  ['shape', () => energyTest([], codes, starts, { seed: 1 })],
  ['too-few-rows', () => energyTest(column(1, 2, 3), Int8Array.of(1, 1, -1), starts, { seed: 1 })],
  ['bad-parameter', () => energyTest(column(1, 2, 3), codes, starts, { seed: 1, maxRows: 0 })],
  ['not-finite', () => energyTest(column(1, Infinity, 3), codes, starts, { seed: 1 })],
  ['shape', () => domainSplitReport({ ...base, lengthsM: new Float64Array(2) }, { seed: 1 })],
  [
    'bad-parameter',
    () => domainSplitReport({ ...base, lengthsM: Float64Array.of(1, -1, 1) }, { seed: 1 }),
  ],
  ['not-finite', () => domainSplitReport({ ...base, coordinates: column(1, NaN, 3) }, { seed: 1 })],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});
