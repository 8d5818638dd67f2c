import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { chiSquareQuantile } from '#kernels/components/chi-square-quantile.ts';
import { consistencyFactor, smallSampleFactor } from '#kernels/components/mcd-factors.ts';
import { fastMcd, mahalanobis, mcdSubsetSize } from '#kernels/components/mcd.ts';
import { subsetMoments } from '#kernels/components/mcd-steps.ts';
import { seededRandom } from '#kernels/random.ts';
import { chiSquareTail } from '#kernels/tables/special-functions.ts';

/** Two-dimensional points whose smallest subset of five is known by trying all of them. */
const SEVEN = Float64Array.of(0, 0, 1, 0.2, 0.2, 1, 1, 1, 0.5, 0.6, 8, -8, 9, -9);

/** Normal points of p variables, every fifth moved far off. */
function contaminated(n: number, p: number, seed: number): Float64Array {
  const random = seededRandom(seed);
  return Float64Array.from({ length: n * p }, (_, i) => {
    const isMoved = Math.floor(i / p) % 5 === 4;
    return random.normal() + (isMoved ? 12 : 0);
  });
}

describe('factors', () => {
  it.each([
    [2, 7.377759],
    [5, 12.832502],
    [20, 34.169607],
  ])('chi-square .975 with %i degrees is %f (computed: scipy)', (df, value) => {
    expect(chiSquareQuantile(0.975, df)).toBeCloseTo(value, 6);
  });

  it('quantile and tail undo each other', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 1e-6, max: 0.999999, noNaN: true }),
        fc.integer({ min: 1, max: 200 }),
        (p, df) => {
          expect(1 - chiSquareTail(chiSquareQuantile(p, df), df)).toBeCloseTo(p, 9);
        },
      ),
    );
    expect(chiSquareQuantile(0, 3)).toBe(0);
  });

  it.each([
    [0.75, 2, 1.859075],
    [0.5, 2, 3.258891],
    [0.75, 5, 1.412071],
    [0.975, 2, 1.104468],
    [0.975, 5, 1.055533],
    [0.975, 10, 1.03556],
    [1, 4, 1],
  ])('consistency of share %f in %i variables is %f (computed: scipy)', (share, p, value) => {
    expect(consistencyFactor(share, p)).toBeCloseTo(value, 6);
  });

  it('small-sample factors fall to 1 with more rows and with all rows used', () => {
    for (const p of [1, 2, 3, 8, 30]) {
      for (const stage of ['raw', 'reweighted'] as const) {
        const factors = [10 * p + 20, 100 * p, 10_000 * p].map((n) =>
          smallSampleFactor(0.75, n, p, stage),
        );
        expect(factors.every((factor, i) => factor > 1 && factor < (factors[i - 1] ?? 2))).toBe(
          true,
        );
        expect(factors[2]).toBeCloseTo(1, 2);
        expect(smallSampleFactor(1, 50, p, stage)).toBe(1);
      }
    }
  });

  it.each([
    ['bad-parameter', () => chiSquareQuantile(1, 2)],
    ['bad-parameter', () => chiSquareQuantile(NaN, 2)],
    ['bad-parameter', () => chiSquareQuantile(0.5, 0)],
    ['bad-parameter', () => consistencyFactor(0, 2)],
    ['bad-parameter', () => consistencyFactor(1.1, 2)],
    ['bad-parameter', () => smallSampleFactor(0.4, 50, 2, 'raw')],
    ['bad-parameter', () => smallSampleFactor(0.75, 50, 0, 'raw')],
    ['too-few-rows', () => smallSampleFactor(0.5, 3, 2, 'reweighted')],
  ] as const)('refuses with %s', (code, call) => {
    expect(call).toThrow(expect.objectContaining({ code }));
  });
});

describe('fastMcd', () => {
  it('finds the best five of seven points, of all subsets (computed: numpy, exhaustive)', () => {
    const { subset, raw } = fastMcd(SEVEN, 2, { seed: 1, share: 0.5 });
    expect([...subset]).toEqual([0, 1, 2, 3, 4]);
    expect(Math.exp(raw.logDeterminant)).toBeCloseTo(0.041055, 6);
    expect([...raw.centre].map((value) => Number(value.toFixed(9)))).toEqual([0.54, 0.56]);
    const distances = mahalanobis(SEVEN, 2, raw.centre, raw.covariance);
    expect(distances[5]).toBeCloseTo(799.39, 2);
    expect(distances[6]).toBeCloseTo(1010.82, 2);
  });

  it('estimates the majority of a table with a fifth moved off, by nested subsets too', () => {
    for (const n of [300, 4000]) {
      const found = fastMcd(contaminated(n, 4, 3), 4, { seed: 2, starts: 100 });
      const moved = Array.from(found.distances.keys()).filter((row) => row % 5 === 4);
      expect(moved.every((row) => found.distances[row]! > found.cutoff)).toBe(true);
      found.centre.forEach((value) => expect(Math.abs(value)).toBeLessThan(0.25));
      for (let i = 0; i < 4; i++) {
        expect(found.covariance[5 * i]).toBeGreaterThan(0.6);
        expect(found.covariance[5 * i]).toBeLessThan(1.6);
      }
    }
  });

  it('is affine equivariant: distances stay when points are turned, scaled and moved', () => {
    const points = contaminated(120, 2, 9);
    const before = fastMcd(points, 2, { seed: 4, starts: 50 });
    fc.assert(
      fc.property(
        fc.double({ min: 0, max: 6, noNaN: true }),
        fc.double({ min: 1e-3, max: 1e3, noNaN: true }),
        fc.double({ min: -50, max: 50, noNaN: true }),
        (angle, scale, shift) => {
          const turned = points.slice();
          for (let at = 0; at < turned.length; at += 2) {
            const [x, y] = [points[at]!, points[at + 1]!];
            turned[at] = scale * (x * Math.cos(angle) - y * Math.sin(angle)) + shift;
            turned[at + 1] = scale * (x * Math.sin(angle) + y * Math.cos(angle)) - shift;
          }
          const after = fastMcd(turned, 2, { seed: 4, starts: 50 });
          expect([...after.subset]).toEqual([...before.subset]);
          after.distances.forEach((distance, row) =>
            expect(distance / before.distances[row]!).toBeCloseTo(1, 6),
          );
        },
      ),
      { numRuns: 10 },
    );
  });

  it('gives the same answer for the same seed and leaves the points as they were', () => {
    const points = contaminated(700, 3, 5);
    const before = points.slice();
    const run = () => fastMcd(points, 3, { seed: 11, starts: 40 });
    expect(run()).toEqual(run());
    expect(points).toEqual(before);
  });

  it('with a share of 1 starts from the classical estimate', () => {
    const points = contaminated(60, 2, 6);
    const { raw, subset } = fastMcd(points, 2, { seed: 1, share: 1, starts: 5 });
    const all = subsetMoments(
      { points, p: 2 },
      Uint32Array.from({ length: 60 }, (_, i) => i),
    );
    expect(subset).toHaveLength(60);
    expect(raw).toMatchObject({ ...all, consistency: 1, smallSample: 1 });
  });

  it('takes one variable, and the subset size of the reference formula', () => {
    const { centre } = fastMcd(Float64Array.of(1, 2, 3, 4, 5, 6, 7, 1000), 1, { seed: 1 });
    expect(centre[0]).toBe(4);
    expect(mcdSubsetSize(155, 3, 0.75)).toBe(117);
    expect(mcdSubsetSize(100, 3, 1)).toBe(100);
  });

  it('names the rows on a plane when most of them are, and copes when few are', () => {
    const points = contaminated(100, 3, 8);
    const onPlane = (until: number) =>
      points.map((value, i) => {
        const row = Math.floor(i / 3);
        return i % 3 === 2 && row < until ? points[3 * row]! - 2 * points[3 * row + 1]! : value;
      });
    expect(() => fastMcd(onPlane(90), 3, { seed: 1, starts: 50 })).toThrow(
      expect.objectContaining({ code: 'singular', detail: { onPlane: 90, nRows: 100 } }),
    );
    expect(fastMcd(onPlane(20), 3, { seed: 1, starts: 50 }).raw.logDeterminant).toBeGreaterThan(-4);
  });

  it.each([
    ['shape', [1, 2, 3], 2, {}],
    ['shape', [1, 2], 0, {}],
    ['too-few-rows', [1, 2, 3, 4, 2, 1, 1, 1], 2, {}],
    ['too-few-rows', [], 2, {}],
    ['not-finite', [...SEVEN.subarray(0, 12), 1, NaN], 2, {}],
    ['not-finite', [...SEVEN.subarray(0, 12), 1, -Infinity], 2, {}],
    ['not-finite', [...SEVEN.subarray(0, 12), 1, 1e200], 2, {}],
    ['bad-parameter', [...SEVEN], 2, { share: 0.4 }],
    ['bad-parameter', [...SEVEN], 2, { share: NaN }],
    ['bad-parameter', [...SEVEN], 2, { starts: 0 }],
    ['bad-parameter', [...SEVEN], 2, { cutoffProbability: 1 }],
    ['singular', new Array<number>(20).fill(3), 2, {}],
    ['singular', Array.from({ length: 20 }, (_, i) => (i % 2 === 0 ? i : -0)), 2, {}],
  ] as const)('refuses with %s: %j in %i variables, %j', (code, points, p, options) => {
    expect(() => fastMcd(Float64Array.from(points), p, { seed: 1, ...options })).toThrow(
      expect.objectContaining({ code }),
    );
  });

  it('refuses distances from a covariance it cannot invert or that does not fit', () => {
    const centre = new Float64Array(2);
    expect(() => mahalanobis(SEVEN, 2, centre, Float64Array.of(1, 1, 1, 1))).toThrow(
      expect.objectContaining({ code: 'singular' }),
    );
    expect(() => mahalanobis(SEVEN, 2, centre, Float64Array.of(1))).toThrow(
      expect.objectContaining({ code: 'shape' }),
    );
  });

  it('stops when the progress report throws', () => {
    const onProgress = () => {
      throw new Error('cancelled');
    };
    expect(() => fastMcd(SEVEN, 2, { seed: 1, onProgress })).toThrow('cancelled');
  });
});
