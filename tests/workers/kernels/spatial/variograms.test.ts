import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { normalQuantile } from '#kernels/normal.ts';
import { directionalVariograms } from '#kernels/spatial/directional-variogram.ts';
import { downHoleVariograms } from '#kernels/spatial/down-hole-variogram.ts';
import { normalScoreTransform } from '#kernels/spatial/normal-score-transform.ts';
import { splitVariogramTest } from '#kernels/spatial/variogram-lags.ts';
import { categoryFrom } from '#kernels/tables/category.ts';
import computed from './fixtures/spatial.json' with { type: 'json' };

const field = {
  x: Float64Array.from(computed.x),
  y: Float64Array.from(computed.y),
  z: Float64Array.from(computed.z),
};
const values = Float64Array.from(computed.value);
const domains = { levels: ['A', 'B'], codes: Int32Array.from(computed.domain) };

/** One hole of metre intervals. */
const holeOf = (n: number) => ({
  holeStarts: Int32Array.of(0, n),
  fromM: Float64Array.from({ length: n }, (_, i) => i),
  toM: Float64Array.from({ length: n }, (_, i) => i + 1),
});
const oneDomain = (n: number) => categoryFrom(Array.from({ length: n }, () => 'A'));

describe('down-hole', () => {
  it('1 3 2 5 4: 1.875, 1.5, 4.25 (computed)', () => {
    const [found] = downHoleVariograms(holeOf(5), oneDomain(5), Float64Array.of(1, 3, 2, 5, 4), {
      lagM: 1,
      lags: 4,
    });
    expect(found?.lags.map(({ gamma, pairs }) => [gamma, pairs])).toEqual([
      [1.875, 4],
      [1.5, 3],
      [4.25, 2],
      [4.5, 1],
    ]);
    expect(found).toMatchObject({ n: 5, variance: 2.5, firstLagRatio: 0.75 });
    // Line through (1, 1.875), (2, 1.5), (3, 4.25): slope 1.1875, intercept .16667, over 2.5.
    expect(found?.noiseShare).toBeCloseTo(1 / 15, 12);
    expect(found?.lags.every(({ isThin }) => isThin)).toBe(true);
  });

  it('pairs neither across gaps, faults and other domains nor with missing values', () => {
    const base = { lagM: 1, lags: 3 };
    const z = Float64Array.of(1, 2, 4, 8);
    const pairs = (
      intervals: Parameters<typeof downHoleVariograms>[0],
      domain = oneDomain(4),
      v = z,
    ) => downHoleVariograms(intervals, domain, v, base)[0]?.lags.map((lag) => lag.pairs);
    expect(pairs(holeOf(4))).toEqual([3, 2, 1]);
    expect(pairs({ ...holeOf(4), isBreakBefore: Uint8Array.of(0, 0, 1, 0) })).toEqual([2, 0, 0]);
    expect(pairs({ ...holeOf(4), holeStarts: Int32Array.of(0, 1, 4) })).toEqual([2, 1, 0]);
    expect(pairs({ ...holeOf(4), toM: Float64Array.of(1, 1.5, 3, 4) })).toEqual([2, 0, 0]);
    expect(pairs(holeOf(4), categoryFrom(['A', 'B', 'A', 'A']))).toEqual([1, 0, 0]);
    expect(pairs(holeOf(4), categoryFrom(['A', null, 'A', 'A']))).toEqual([1, 0, 0]);
    expect(pairs(holeOf(4), oneDomain(4), Float64Array.of(1, NaN, 4, 8))).toEqual([1, 1, 1]);
  });

  it('has nothing to say of one sample or of a constant', () => {
    const [one] = downHoleVariograms(holeOf(1), oneDomain(1), Float64Array.of(3), {
      lagM: 1,
      lags: 3,
    });
    expect(one).toMatchObject({ n: 1, variance: null, firstLagRatio: null, noiseShare: null });
    expect(one?.lags[0]).toEqual({ lag: 1, distanceM: null, gamma: null, pairs: 0, isThin: true });
    const [flat] = downHoleVariograms(holeOf(9), oneDomain(9), new Float64Array(9).fill(2), {
      lagM: 1,
    });
    expect(flat).toMatchObject({ variance: 0, firstLagRatio: null, noiseShare: null });
  });

  it('a split that follows a step lowers short-range variance; one that does not, does not', () => {
    const z = Float64Array.from({ length: 60 }, (_, i) => (i % 10 < 5 ? 0 : 10) + (i % 2));
    const steps = categoryFrom(Array.from(z.keys(), (i) => (i % 10 < 5 ? 'low' : 'high')));
    const halves = categoryFrom(Array.from(z.keys(), (i) => (i < 30 ? 'upper' : 'lower')));
    const options = { lagM: 1 };
    const [before] = downHoleVariograms(holeOf(60), oneDomain(60), z, options);
    if (!before) throw new Error('no variogram');
    const after = (parts: typeof steps) =>
      splitVariogramTest(before, downHoleVariograms(holeOf(60), parts, z, options)).ratio ?? NaN;
    expect(after(steps)).toBeLessThan(0.05);
    expect(after(halves)).toBeGreaterThan(0.9);
    expect(splitVariogramTest(before, []).ratio).toBeNull();
  });
});

describe('directional', () => {
  it.each([0, 1])('domain %d along 060/20, cone 35 degrees, bandwidth 40 m (numpy)', (code) => {
    const { trend, plunge, toleranceDegrees, bandwidthM, lagM, lags, byDomain } =
      computed.directional;
    const direction = { trend, plunge, toleranceDegrees, bandwidthM };
    const found = directionalVariograms(field, domains, values, { lagM, lags, direction })[code];
    byDomain[code]?.forEach(([pairs, gamma], i) => {
      expect(found?.lags[i]?.pairs).toBe(pairs);
      expect(found?.lags[i]?.gamma).toBeCloseTo(gamma ?? NaN, 10);
    });
  });

  it.each([0, 1])('domain %d in all directions (numpy)', (code) => {
    const { lagM, lags, byDomain } = computed.omnidirectional;
    const found = directionalVariograms(field, domains, values, { lagM, lags })[code];
    byDomain[code]?.forEach(([pairs, gamma], i) => {
      expect(found?.lags[i]?.pairs).toBe(pairs);
      expect(found?.lags[i]?.gamma).toBeCloseTo(gamma ?? NaN, 10);
    });
  });

  it('turning the field and the direction together changes nothing, nor does the order of rows', () => {
    const options = { lagM: 15, lags: 6 };
    const cone = { plunge: 0, toleranceDegrees: 40, bandwidthM: 60 };
    const along = (positions: typeof field, v: Float64Array, d: typeof domains, trend: number) =>
      directionalVariograms(positions, d, v, { ...options, direction: { ...cone, trend } });
    const still = along(field, values, domains, 30);
    // a quarter turn clockwise: east becomes south
    const turned = along(
      { x: field.y, y: field.x.map((x) => -x), z: field.z },
      values,
      domains,
      120,
    );
    const reversed = along(
      { x: field.x.slice().reverse(), y: field.y.slice().reverse(), z: field.z.slice().reverse() },
      values.slice().reverse(),
      { ...domains, codes: domains.codes.slice().reverse() },
      30,
    );
    for (const other of [turned, reversed]) {
      other.forEach(({ lags }, code) =>
        lags.forEach((lag, i) => {
          expect(lag.pairs).toBe(still[code]?.lags[i]?.pairs);
          expect(lag.gamma ?? -1).toBeCloseTo(still[code]?.lags[i]?.gamma ?? -1, 9);
        }),
      );
    }
  });

  it('of a straight hole it is the down-hole variogram', () => {
    const z = Float64Array.of(1, 3, 2, 5, 4);
    const positions = {
      x: new Float64Array(5),
      y: new Float64Array(5),
      z: Float64Array.of(0, -1, -2, -3, -4),
    };
    const direction = { trend: 0, plunge: 90 };
    const [found] = directionalVariograms(positions, oneDomain(5), z, {
      lagM: 1,
      lags: 4,
      direction,
    });
    expect(found).toEqual(downHoleVariograms(holeOf(5), oneDomain(5), z, { lagM: 1, lags: 4 })[0]);
  });

  it('skips pairs at one spot', () => {
    const at = { x: new Float64Array(3), y: new Float64Array(3), z: new Float64Array(3) };
    const [found] = directionalVariograms(at, oneDomain(3), Float64Array.of(1, 2, 3), {
      lagM: 1,
      lags: 2,
    });
    expect(found?.lags.map(({ pairs }) => pairs)).toEqual([0, 0]);
  });
});

it('a shift of all values changes no variogram; a factor goes in by its square', () => {
  fc.assert(
    fc.property(
      fc.array(fc.integer({ min: -50, max: 50 }), { minLength: 4, maxLength: 30 }),
      fc.integer({ min: 2, max: 5 }),
      (list, factor) => {
        const z = Float64Array.from(list);
        const gammas = (v: Float64Array) =>
          downHoleVariograms(holeOf(v.length), oneDomain(v.length), v, {
            lagM: 1,
            lags: 3,
          })[0]?.lags.map((lag) => lag.gamma ?? 0) ?? [];
        const plain = gammas(z);
        gammas(z.map((v) => v + 1000)).forEach((g, i) => expect(g).toBe(plain[i]));
        gammas(z.map((v) => v * factor)).forEach((g, i) =>
          expect(g).toBeCloseTo((plain[i] ?? 0) * factor ** 2, 8),
        );
      },
    ),
  );
});

it('normal scores keep order, share ties and pass missing values by', () => {
  const scores = normalScoreTransform(Float64Array.of(5, NaN, 1, 5, 9));
  expect(scores[1]).toBeNaN();
  expect(scores[0]).toBe(scores[3]);
  expect(scores[2]).toBeCloseTo(normalQuantile(0.125), 14);
  expect(scores[0]).toBeCloseTo(normalQuantile(0.5), 14);
});

const three = Float64Array.of(1, 2, 3);
it.each([
  ['bad-parameter', () => downHoleVariograms(holeOf(3), oneDomain(3), three, { lagM: 0 })],
  [
    'bad-parameter',
    () => downHoleVariograms(holeOf(3), oneDomain(3), three, { lagM: 1, lags: 1.5 }),
  ],
  [
    'not-finite',
    () => downHoleVariograms(holeOf(3), oneDomain(3), Float64Array.of(1, 2, Infinity), { lagM: 1 }),
  ],
  ['shape', () => downHoleVariograms(holeOf(4), oneDomain(4), three, { lagM: 1 })],
  ['shape', () => directionalVariograms(field, domains, three, { lagM: 1 })],
  [
    'bad-parameter',
    () =>
      directionalVariograms(field, domains, values, {
        lagM: 1,
        direction: { trend: 0, plunge: 91 },
      }),
  ],
  [
    'bad-parameter',
    () =>
      directionalVariograms(field, domains, values, {
        lagM: 1,
        direction: { trend: 0, plunge: 0, toleranceDegrees: 0 },
      }),
  ],
  ['too-few-rows', () => normalScoreTransform(Float64Array.of(NaN))],
  ['not-finite', () => normalScoreTransform(Float64Array.of(1, -Infinity))],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});
