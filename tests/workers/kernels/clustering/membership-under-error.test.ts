import fc from 'fast-check';
import { expect, it } from 'vitest';
import {
  errorSource,
  logErrorSd,
  redraw,
  type PartUnderError,
} from '#kernels/clustering/assay-error.ts';
import {
  membershipUnderError,
  type MembershipUnderErrorInput,
} from '#kernels/clustering/membership-under-error.ts';
import { normalCdf } from '#kernels/normal.ts';
import { seededRandom } from '#kernels/random.ts';

const part = (values: number[], change: Partial<PartUnderError> = {}): PartUnderError => ({
  values: Float64Array.from(values),
  error: { s0: 0.5, k: 0.05 },
  lognormal: null,
  ...change,
});
/** Group 1 where the first part is larger. */
const assign = ([a, b]: readonly Float64Array[]) =>
  Array.from(a ?? [], (value, row) =>
    Number.isNaN(value + b![row]!) ? 0 : value > b![row]! ? 1 : 2,
  );
const run = (change: Partial<MembershipUnderErrorInput> = {}) =>
  membershipUnderError({
    parts: [part([12, 10.4]), part([10, 10.4001])],
    assign,
    k: 2,
    lengthM: Float64Array.of(1, 3),
    seed: 1,
    ...change,
  });

it('has the spread of ln ppm and the probability of the closed form', () => {
  const [a, b] = [logErrorSd(12, { s0: 0.5, k: 0.05 }).sd, logErrorSd(10, { s0: 0.5, k: 0.05 }).sd];
  expect(a).toBeCloseTo(0.091475, 6);
  expect(b).toBeCloseTo(0.099751, 6);
  // ln (12/10) less half the difference of the variances, over the sd of a difference: numpy .911963
  const exact = normalCdf((Math.log(1.2) - (a * a - b * b) / 2) / Math.hypot(a, b));
  expect(Math.log(1.2) - (a * a - b * b) / 2).toBeCloseTo(0.183113, 6);
  expect(Math.hypot(a, b)).toBeCloseTo(0.135344, 6);
  expect(exact).toBeCloseTo(0.911963, 6);
  const draws = 4000;
  const { probability } = run({ draws });
  expect(Math.abs(probability[0]! - exact)).toBeLessThan(
    4 * Math.sqrt((exact * (1 - exact)) / draws),
  );
});

it('flags rows on a boundary and counts their metres', () => {
  const { labels, largest, unstable, entropy, groups, notes } = run();
  expect([...labels]).toEqual([1, 2]);
  expect(unstable[0]).toBe(0);
  expect(unstable[1]).toBe(1);
  expect(largest[1]).toBeLessThan(0.8);
  expect(entropy[1]).toBeGreaterThan(entropy[0]!);
  expect(groups).toEqual([
    { label: 1, metres: 1, uncertainShare: 0 },
    { label: 2, metres: 3, uncertainShare: 1 },
  ]);
  expect(notes).toEqual([]);
});

it('without error every probability is 0 or 1, and the sum is 1', () => {
  const positive = fc.double({ min: 0.001, max: 1e6, noNaN: true });
  fc.assert(
    fc.property(positive, positive, fc.boolean(), (a, b, known) => {
      const error = known ? { s0: 0, k: 0 } : null;
      const { probability, unstable } = run({
        parts: [part([a], { error }), part([b], { error })],
        lengthM: Float64Array.of(1),
        draws: 5,
      });
      expect([...probability].sort()).toEqual([0, 1]);
      expect(unstable[0]).toBe(0);
    }),
    { numRuns: 40, seed: 1 },
  );
});

it('keeps the mean of a value and draws below the limit only', () => {
  const random = seededRandom(3);
  const values = new Array<number>(20_000).fill(8);
  const out = new Float64Array(20_000);
  redraw(errorSource(part(values, { error: { s0: 1, k: 0.1 } }), 0, 20_000), random, out);
  expect(out.reduce((sum, value) => sum + value, 0) / 20_000).toBeCloseTo(8, 1);
  const limits = Float64Array.from(values, () => 2);
  redraw(
    errorSource(part(values, { limits, lognormal: { mean: 1, sd: 2 } }), 0, 20_000),
    random,
    out,
  );
  expect(out.every((value) => value > 0 && value <= 2 * (1 + 1e-9))).toBe(true);
  // The middle of a normal (1, 2) under ln 2 is at half the share below it.
  const under = normalCdf((Math.log(2) - 1) / 2);
  const middle = [...out].sort((a, b) => a - b)[10_000]!;
  expect(normalCdf((Math.log(middle) - 1) / 2)).toBeCloseTo(under / 2, 1);
});

it('says what it held, kept and left as it was; a missing value leaves the row out', () => {
  const limits = Float64Array.of(NaN, 11);
  const { notes, labels, probability } = run({
    parts: [part([0.1, 7], { limits }), part([NaN, 9], { error: null })],
  });
  expect(notes).toEqual([
    '1 of 2 parts have no known error and stayed as they are',
    '1 values have an error larger than themselves: it was held at the value',
    '1 values below detection have no fitted distribution and stayed as replaced',
  ]);
  expect(labels[0]).toBe(0);
  expect([...probability]).toEqual([NaN, NaN, 0, 1]);
  expect(logErrorSd(1, { s0: 5, k: 0 }).sd).toBeCloseTo(0.832555, 6);
});

it('repeats with the seed and lets the listener cancel', () => {
  expect(run()).toEqual(run());
  const stop = () => {
    throw new Error('cancelled');
  };
  expect(() => run({ onProgress: stop })).toThrow('cancelled');
});

it.each<[string, Partial<MembershipUnderErrorInput>]>([
  ['too-few-parts', { parts: [] }],
  ['shape', { parts: [part([1])] }],
  ['shape', { assign: () => [1] }],
  ['bad-parameter', { assign: () => [1, 3] }],
  ['bad-parameter', { draws: 0 }],
  ['bad-parameter', { k: NaN }],
  ['not-positive', { parts: [part([0, 1])] }],
  ['not-positive', { parts: [part([1, Infinity])] }],
  ['not-positive', { parts: [part([1, 1], { limits: Float64Array.of(NaN, 0) })] }],
  ['bad-parameter', { parts: [part([1, 1], { error: { s0: -1, k: 0 } })] }],
  ['bad-parameter', { parts: [part([1, 1], { lognormal: { mean: 0, sd: 0 } })] }],
])('refuses %s', (code, change) => {
  expect(() => run(change)).toThrow(expect.objectContaining({ code }));
});
