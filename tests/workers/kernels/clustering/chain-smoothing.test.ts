import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  chainMarginals,
  likeliestChain,
  logTransitions,
  type ChainInput,
} from '#kernels/clustering/chain-smoothing.ts';
import { changedShare, modeFilter } from '#kernels/clustering/mode-filter.ts';
import { strengthForRun } from '#kernels/clustering/smoothing-strength.ts';

/** Probability of class 1 in seven touching intervals of 2 m; expected values from all 128 paths. */
const FIRST = [0.9, 0.8, 0.4, 0.9, 0.2, 0.1, 0.1];
const chain = (change: Partial<ChainInput> = {}, first = FIRST): ChainInput => ({
  membership: Float64Array.from(first.flatMap((p) => [p, 1 - p])),
  k: 2,
  sequence: first.map(() => 0),
  fromM: Float64Array.from(first, (_, row) => 2 * row),
  toM: Float64Array.from(first, (_, row) => 2 * row + 2),
  beta: 1.5,
  fadeM: 4,
  ...change,
});

it.each([
  [0, [1, 1, 2, 1, 2, 2, 2]],
  [0.2, [1, 1, 2, 1, 2, 2, 2]],
  [0.4, [1, 1, 1, 1, 2, 2, 2]],
  [1.5, [1, 1, 1, 1, 2, 2, 2]],
])('at a reward of %d the labels are those of the best of all paths', (beta, labels) => {
  expect([...likeliestChain(chain({ beta })).labels]).toEqual(labels);
});

it('has the optimum and the marginals computed from all paths', () => {
  expect(likeliestChain(chain()).score).toBeCloseTo(5.71598, 6);
  const marginals = chainMarginals(chain());
  [0.95471, 0.931555, 0.797501, 0.806787, 0.183266, 0.032157, 0.034104].forEach((p, row) =>
    expect(marginals[2 * row]).toBeCloseTo(p, 6),
  );
});

it('a lone flip survives only when its log-odds exceed twice the reward', () => {
  const first = [0.9, 0.9, 0.4, 0.9, 0.9]; // log-odds .405465
  expect(likeliestChain(chain({ beta: 0.202 }, first)).labels[2]).toBe(2);
  expect(likeliestChain(chain({ beta: 0.203 }, first)).labels[2]).toBe(1);
});

const probabilities = fc.array(fc.double({ min: 0.01, max: 0.99, noNaN: true }), {
  minLength: 1,
  maxLength: 7,
});

it('equals a search of all paths', () => {
  fc.assert(
    fc.property(probabilities, fc.double({ min: 0, max: 3, noNaN: true }), (first, beta) => {
      const n = first.length;
      const weight = new Float64Array(n);
      let [best, total] = [-Infinity, 0];
      for (let path = 0; path < 2 ** n; path++) {
        const isFirst = (row: number) => ((path >> row) & 1) === 1;
        let score = 0;
        first.forEach((p, row) => {
          score += Math.log(isFirst(row) ? p : 1 - p);
          if (row > 0 && isFirst(row) === isFirst(row - 1)) score += beta;
        });
        best = Math.max(best, score);
        total += Math.exp(score);
        first.forEach((_, row) => {
          if (isFirst(row)) weight[row]! += Math.exp(score);
        });
      }
      expect(likeliestChain(chain({ beta }, first)).score).toBeCloseTo(best, 9);
      const marginals = chainMarginals(chain({ beta }, first));
      first.forEach((_, row) => {
        expect(marginals[2 * row]).toBeCloseTo(weight[row]! / total, 9);
        expect(marginals[2 * row]! + marginals[2 * row + 1]!).toBeCloseTo(1, 12);
      });
    }),
    { numRuns: 60, seed: 1 },
  );
});

it('the reward fades over a gap, ends at a sequence and at a missing row', () => {
  const first = [0.9, 0.4, 0.9];
  const labels = (change: Partial<ChainInput>) => [
    ...likeliestChain(chain({ beta: 1, ...change }, first)).labels,
  ];
  expect(labels({})).toEqual([1, 1, 1]);
  const far = Float64Array.of(0, 40, 80);
  expect(labels({ fromM: far, toM: far.map((from) => from + 2) })).toEqual([1, 2, 1]);
  expect(labels({ sequence: [0, 1, 2] })).toEqual([1, 2, 1]);
  const membership = Float64Array.of(0.9, 0.1, NaN, NaN, 0.4, 0.6);
  expect(labels({ membership })).toEqual([1, 0, 2]);
  expect(
    [...chainMarginals(chain({ beta: 1, membership }, first))].map((p) => Number(p.toFixed(9))),
  ).toEqual([0.9, 0.1, NaN, NaN, 0.4, 0.6]);
});

it('steps from counts: rows of the transition table sum to 1, and a rare step is avoided', () => {
  const logs = logTransitions(Float64Array.of(8, 0, 0, 8), 2);
  expect([...logs].map(Math.exp)).toEqual([0.9, 0.1, 0.1, 0.9].map((p) => expect.closeTo(p, 12)));
  const first = [0.9, 0.4, 0.9];
  expect([...likeliestChain(chain({ logTransition: logs, beta: 0 }, first)).labels]).toEqual([
    1, 1, 1,
  ]);
});

describe('strength for a run', () => {
  it('is the least that makes the run long enough', () => {
    const { beta, meanRunM } = strengthForRun(chain(), 7);
    expect(meanRunM).toBe(7);
    expect(beta).toBeGreaterThan(0.2027);
    expect(beta).toBeLessThan(0.2047); // the flip of .4 goes at half of its log-odds
    expect(strengthForRun(chain(), 2)).toEqual({ beta: 0, meanRunM: 3.5, notes: [] });
  });

  it('says when the stretches are too short for it', () => {
    expect(strengthForRun(chain(), 100).notes.join()).toContain(
      'the sampled stretches are shorter',
    );
  });
});

describe('mode filter', () => {
  const filter = (
    labels: number[],
    change: { sequence?: number[]; window?: number; lengthM?: number[] } = {},
  ) =>
    modeFilter({
      labels,
      sequence: change.sequence ?? labels.map(() => 0),
      lengthM: Float64Array.from(change.lengthM ?? labels.map(() => 1)),
      window: change.window,
    });

  it('takes the majority by metres, keeps the centre on a tie, never crosses a break', () => {
    expect([...filter([1, 1, 2, 1, 1]).labels]).toEqual([1, 1, 1, 1, 1]);
    expect(filter([1, 1, 2, 1, 1]).changedShare).toBe(0.2);
    expect([...filter([1, 2, 3]).labels]).toEqual([1, 2, 3]);
    expect([...filter([1, 2, 1], { lengthM: [1, 3, 1] }).labels]).toEqual([2, 2, 2]);
    expect([...filter([1, 2, 1], { sequence: [0, 1, 2] }).labels]).toEqual([1, 2, 1]);
    expect([...filter([1, 0, 2, 1, 1]).labels]).toEqual([1, 0, 2, 1, 1]);
  });

  it('a window of one row changes nothing', () => {
    fc.assert(
      fc.property(
        fc.array(fc.integer({ min: 0, max: 3 }), { minLength: 1, maxLength: 20 }),
        (labels) => {
          expect([...filter(labels, { window: 1 }).labels]).toEqual(labels);
          expect(filter(labels).labels.filter((label) => label === 0)).toHaveLength(
            labels.filter((label) => label === 0).length,
          );
        },
      ),
      { seed: 1 },
    );
    expect(changedShare([], [])).toBe(0);
  });

  it.each([
    ['bad-parameter', () => filter([1, 2], { window: 2 })],
    ['bad-parameter', () => filter([1, -1])],
    ['shape', () => filter([1, 2], { sequence: [0] })],
  ])('refuses %s', (code, call) => {
    expect(call).toThrow(expect.objectContaining({ code }));
  });
});

it.each<[string, Partial<ChainInput>]>([
  ['bad-parameter', { beta: -0.1 }],
  ['bad-parameter', { beta: Infinity }],
  ['bad-parameter', { fadeM: 0 }],
  ['bad-parameter', { membership: Float64Array.from({ length: 14 }, () => -1) }],
  ['shape', { membership: new Float64Array(3) }],
  ['shape', { toM: new Float64Array(3) }],
  ['shape', { logTransition: new Float64Array(3) }],
])('refuses %s for %j', (code, change) => {
  expect(() => likeliestChain(chain(change))).toThrow(expect.objectContaining({ code }));
  expect(() => chainMarginals(chain(change))).toThrow(expect.objectContaining({ code }));
});
