import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  cellSizesFor,
  declusterCurve,
  declusterWeights,
} from '#kernels/spatial/cell-declustering.ts';
import { coordinateAlong, lineDirection } from '#kernels/spatial/positions.ts';
import { swathProfile } from '#kernels/spatial/swath.ts';
import computed from './fixtures/spatial.json' with { type: 'json' };

const positionsOf = (points: readonly (readonly number[])[]) => ({
  x: Float64Array.from(points, ([x = NaN]) => x),
  y: Float64Array.from(points, ([, y = NaN]) => y),
  z: Float64Array.from(points, ([, , z = 0]) => z),
});
const six = positionsOf([
  [5, 5],
  [6, 6],
  [7, 5],
  [25, 5],
  [5, 25],
  [25, 25],
]);
const sixGrades = Float64Array.of(9, 10, 11, 2, 1, 3);
const cube = (edge: number) => ({ x: edge, y: edge, z: edge });
const field = {
  x: Float64Array.from(computed.x),
  y: Float64Array.from(computed.y),
  z: Float64Array.from(computed.z),
};
const grades = Float64Array.from(computed.value);

describe('cell declustering', () => {
  it('six points, cell 20 m, origin 0: naive mean 6, declustered 4 (computed)', () => {
    const weights = declusterWeights(six, cube(20), { offsets: 1, origin: cube(0) });
    [0.5, 0.5, 0.5, 1.5, 1.5, 1.5].forEach((w, i) => expect(weights[i]).toBeCloseTo(w, 12));
    const curve = declusterCurve(six, sixGrades, { offsets: 1, sizesM: [0.1, 20, 1000] });
    expect(curve.naiveMean).toBe(6);
    expect(curve.chosen).toEqual({ sizeM: 20, mean: 4 });
    expect(curve.note).toBeNull();
  });

  it('sixty points, eight offsets (numpy)', () => {
    const [x = NaN, y = NaN, z = NaN] = computed.declustering.cell;
    const weights = declusterWeights(field, { x, y, z });
    computed.declustering.weights.forEach((w, i) => expect(weights[i]).toBeCloseTo(w, 10));
    const { points } = declusterCurve(field, grades, { sizesM: [25], verticalM: 10 });
    expect(points[0]?.mean).toBeCloseTo(computed.declustering.mean, 10);
  });

  it('very small and very large cells weigh all rows alike', () => {
    for (const edge of [1e-3, 1e6])
      declusterWeights(field, cube(edge)).forEach((w) => expect(w).toBeCloseTo(1, 9));
  });

  it('weights are positive, sum to n, and follow their rows wherever these stand', () => {
    const int = (max: number) => fc.integer({ min: -max, max });
    const point = fc.tuple(int(40), int(30), int(20));
    fc.assert(
      fc.property(
        fc.array(point, { minLength: 1, maxLength: 40 }),
        fc.integer({ min: 1, max: 30 }),
        (points, edge) => {
          const weights = declusterWeights(positionsOf(points), cube(edge));
          expect(weights.reduce((a, b) => a + b, 0)).toBeCloseTo(points.length, 8);
          expect(weights.every((w) => w > 0)).toBe(true);
          const moved = points.map(([x, y, z]) => [x + 512, y - 64, z + 8]).reverse();
          const again = declusterWeights(positionsOf(moved), cube(edge)).reverse();
          again.forEach((w, i) => expect(w).toBeCloseTo(weights[i] ?? NaN, 8));
        },
      ),
    );
  });

  it('finds the greatest mean where low grade is clustered, and says when the extreme is an end', () => {
    const low = sixGrades.map((g) => 12 - g);
    const sizesM = [0.1, 20, 1000];
    const curve = declusterCurve(six, low, { offsets: 1, sizesM, clustered: 'low' });
    expect(curve.chosen).toEqual({ sizeM: 20, mean: 8 });
    expect(declusterCurve(six, low, { offsets: 1, sizesM }).note).toContain('nominal hole spacing');
  });

  it('tries twenty sizes up to the extent unless told', () => {
    const sizes = cellSizesFor(six);
    expect(sizes).toHaveLength(20);
    expect(sizes[0]).toBeCloseTo(0.4, 12);
    expect(sizes[19]).toBeCloseTo(20, 12);
    expect(declusterCurve(six, sixGrades).points).toHaveLength(20);
  });

  it('one row weighs 1', () => {
    expect([...declusterWeights(positionsOf([[1, 2, 3]]), cube(5))]).toEqual([1]);
  });
});

describe('swath', () => {
  it('slice means, trend and rank correlation of sixty points (numpy, scipy)', () => {
    const swath = swathProfile(field.x, grades, { widthM: 25 });
    const means = swath.slices.flatMap(({ mean }) => mean ?? []);
    expect(means).toHaveLength(computed.swath.means.length);
    computed.swath.means.forEach((mean, i) => expect(means[i]).toBeCloseTo(mean, 12));
    expect(swath.trendPer100M).toBeCloseTo(computed.swath.trendPer100M, 10);
    expect(swath.rankCorrelation).toBeCloseTo(computed.swath.rankCorrelation, 12);
    expect(swath.isDrifting).toBe(false);
  });

  it('standard error uses the effective number of rows (by hand: s² .8, n 2.67)', () => {
    const weights = Float64Array.of(1, 2, 1);
    const { slices } = swathProfile(Float64Array.of(1, 2, 3), Float64Array.of(1, 2, 3), {
      widthM: 10,
      weights,
    });
    expect(slices).toHaveLength(1);
    expect(slices[0]?.mean).toBe(2);
    expect(slices[0]?.standardError).toBeCloseTo(Math.sqrt(0.8 / (16 / 6)), 12);
  });

  it('flags a drift and says why', () => {
    const along = Float64Array.from({ length: 100 }, (_, i) => i + 0.5);
    const rising = swathProfile(
      along,
      along.map((x) => 1 + x),
      { widthM: 25 },
    );
    expect(rising.isDrifting).toBe(true);
    expect(rising.trendPer100M).toBeCloseTo(100, 9);
    expect(rising.reasons).toHaveLength(2);
    expect(rising.reasons[1]).toContain('1.00, beyond 0.2');
  });

  it('leaves gaps empty and constants undecided', () => {
    const swath = swathProfile(Float64Array.of(0, 100), Float64Array.of(5, 5), { widthM: 25 });
    expect(swath.slices.map(({ n }) => n)).toEqual([1, 0, 0, 0, 1]);
    expect(swath.slices[1]).toMatchObject({ mean: null, standardError: null });
    expect(swath).toMatchObject({
      trendPer100M: 0,
      rankCorrelation: null,
      rangeInSd: null,
      isDrifting: false,
    });
    const one = swathProfile(Float64Array.of(3), Float64Array.of(5), { widthM: 25 });
    expect(one).toMatchObject({ trendPer100M: null, isDrifting: false });
  });

  it('conserves rows whatever the width', () => {
    fc.assert(
      fc.property(
        fc.array(fc.integer({ min: -500, max: 500 }), { minLength: 1 }),
        fc.integer({ min: 1, max: 90 }),
        (list, widthM) => {
          const along = Float64Array.from(list);
          const { slices } = swathProfile(along, along, { widthM });
          expect(slices.reduce((sum, { n }) => sum + n, 0)).toBe(list.length);
          const total = slices.reduce((sum, { n, mean }) => sum + n * (mean ?? 0), 0);
          expect(total).toBeCloseTo(
            list.reduce((a, b) => a + b, 0),
            6,
          );
        },
      ),
    );
  });
});

describe('directions', () => {
  it('runs along east, north and down', () => {
    const at = positionsOf([[10, 20, -30]]);
    expect(coordinateAlong(at, lineDirection(90, 0))[0]).toBeCloseTo(10, 12);
    expect(coordinateAlong(at, lineDirection(0, 0))[0]).toBeCloseTo(20, 12);
    expect(coordinateAlong(at, lineDirection(0, 90))[0]).toBeCloseTo(30, 12);
  });
});

const two = Float64Array.of(1, 2);

it.each([
  ['bad-parameter', () => declusterWeights(six, cube(0))],
  ['bad-parameter', () => declusterWeights(six, cube(NaN))],
  ['bad-parameter', () => declusterWeights(six, cube(5), { offsets: 0 })],
  ['bad-parameter', () => declusterWeights(six, cube(5), { origin: cube(6) })],
  ['bad-parameter', () => declusterWeights(field, cube(1e-6))],
  ['not-finite', () => declusterWeights(positionsOf([[1, NaN]]), cube(5))],
  ['too-few-rows', () => declusterWeights(positionsOf([]), cube(5))],
  ['shape', () => declusterWeights({ ...six, z: two }, cube(5))],
  ['shape', () => declusterCurve(six, two)],
  ['bad-parameter', () => declusterCurve(six, sixGrades, { sizesM: [] })],
  [
    'constant',
    () =>
      declusterCurve(
        positionsOf([
          [1, 1],
          [1, 1],
        ]),
        two,
      ),
  ],
  ['bad-parameter', () => swathProfile(two, two, { widthM: 0 })],
  ['bad-parameter', () => swathProfile(Float64Array.of(0, 1e9), two, { widthM: 1 })],
  ['shape', () => swathProfile(two, sixGrades, { widthM: 1 })],
  ['not-finite', () => swathProfile(two, Float64Array.of(1, -Infinity), { widthM: 1 })],
  ['too-few-rows', () => swathProfile(new Float64Array(0), new Float64Array(0), { widthM: 1 })],
  ['bad-parameter', () => lineDirection(400, 0)],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});
