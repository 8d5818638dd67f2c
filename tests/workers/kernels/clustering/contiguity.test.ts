import { expect, it } from 'vitest';
import { contiguity, transitionStatistics } from '#kernels/clustering/contiguity.ts';
import { downHoleSequences } from '#kernels/clustering/down-hole-sequences.ts';
import { seededRandom } from '#kernels/random.ts';

const labelsOf = (text: string) => [...text].map((letter) => 'ABCDEFG'.indexOf(letter) + 1);
const one = (text: string, length = 2) => ({
  labels: labelsOf(text),
  sequence: new Int32Array(text.length),
  lengthM: new Float64Array(text.length).fill(length),
});

it.each([
  ['AAABBAAACCCC', 4, 8.333333, 2.040404, -3.03364],
  ['AAABBBABBB', 4, 5.8, 2.026667, -1.264391],
])(
  'runs of %s agree with the closed form (checked by 200,000 shuffles)',
  (text, runs, expected, variance, z) => {
    const found = contiguity(one(text));
    expect(found.runs).toBe(runs);
    expect(found.expectedRuns).toBeCloseTo(expected, 6);
    expect(found.varianceRuns).toBeCloseTo(variance, 6);
    expect(found.z).toBeCloseTo(z, 6);
  },
);

it('AABBCC agrees with all its orders written out', () => {
  // 90 orders enumerated: mean 5, variance .8
  expect(contiguity(one('AABBCC'))).toMatchObject({
    expectedRuns: 5,
    varianceRuns: expect.closeTo(0.8, 12),
  });
});

/** Runs of every distinct order of a text: mean and variance. */
function runsOfAllOrders(text: string): { orders: number; mean: number; variance: number } {
  const left = new Map<string, number>();
  for (const letter of text) left.set(letter, (left.get(letter) ?? 0) + 1);
  let [orders, sum, squares] = [0, 0, 0];
  const place = (placed: number, last: string, runs: number): void => {
    if (placed === text.length) {
      orders++;
      sum += runs;
      squares += runs * runs;
      return;
    }
    for (const [letter, count] of left) {
      if (count === 0) continue;
      left.set(letter, count - 1);
      place(placed + 1, letter, runs + Number(letter !== last));
      left.set(letter, count);
    }
  };
  place(0, '', 0);
  return { orders, mean: sum / orders, variance: squares / orders - (sum / orders) ** 2 };
}

it.each([
  ['AABBCC', 90],
  ['AAABBBABBB', 210],
  // 200,000 shuffles in numpy gave 8.3343 and 2.0431.
  ['AAABBAAACCCC', 13_860],
])('expected runs and variance of %s are those of all %i orders', (text, count) => {
  const { orders, mean, variance } = runsOfAllOrders(text);
  const found = contiguity(one(text));
  expect(orders).toBe(count);
  expect(found.expectedRuns).toBeCloseTo(mean, 10);
  expect(found.varianceRuns).toBeCloseTo(variance, 10);
});

it('joins and runs add up to the rows', () => {
  const found = contiguity(one('AAABBAAACCCC'));
  expect(found.joins).toBe(8);
  expect(found.expectedJoins).toBeCloseTo(3.666667, 6);
  expect(found.joins + found.runs).toBe(12);
});

it('counts each step down the hole once (worked by hand)', () => {
  const { transitions } = contiguity(one('AAABBAAACCCC'));
  expect([...transitions]).toEqual([4, 1, 1, 1, 1, 0, 0, 0, 3]);
  const { chiSquare, g, degreesOfFreedom } = transitionStatistics(transitions, 3);
  expect(chiSquare).toBeCloseTo(8.341667, 6);
  expect(g).toBeCloseTo(9.613026, 6);
  expect(degreesOfFreedom).toBe(4);
});

it('describes each class: own runs, expectation, kappa, mean run in metres', () => {
  const [a, b, c] = contiguity(one('AAABBAAACCCC', 1.5)).classes;
  expect(a).toMatchObject({
    label: 1,
    rows: 6,
    metres: 9,
    runs: 2,
    expectedRuns: 3.5,
    meanRunM: 4.5,
    mergeWith: null,
  });
  expect(a?.kappa).toBeCloseTo(1 - 2 / 3.5, 12);
  expect(b).toMatchObject({ runs: 1, rows: 2, meanRunM: 3 });
  expect(c).toMatchObject({ runs: 1, expectedRuns: 3, meanRunM: 6 });
});

it('expectations of classes add up to that of the whole', () => {
  const random = seededRandom(3);
  const text = Array.from({ length: 200 }, () => 'ABCD'[random.below(4)]).join('');
  const found = contiguity(one(text));
  expect(found.classes.reduce((sum, row) => sum + row.expectedRuns, 0)).toBeCloseTo(
    found.expectedRuns,
    9,
  );
});

it('sequences add, and one of a single row is left out', () => {
  const text = 'AAABBAAACCCC' + 'B' + 'AAABBBABBB';
  const sequence = Int32Array.from([...text], (_, i) => (i < 12 ? 0 : i < 13 ? 1 : 2));
  const found = contiguity({ ...one(text), sequence });
  expect(found.expectedRuns).toBeCloseTo(8.333333 + 5.8, 5);
  expect(found.varianceRuns).toBeCloseTo(2.040404 + 2.026667, 5);
  expect(found.nUsed).toBe(22);
});

it('an unassigned row ends a run and counts nowhere', () => {
  const found = contiguity({
    labels: [1, 1, 0, 1, 1],
    sequence: new Int32Array(5),
    lengthM: new Float64Array(5).fill(1),
  });
  expect(found).toMatchObject({ runs: 2, nUsed: 4, z: null });
});

it('proposes a salt-and-pepper class for merging with its commonest neighbour', () => {
  const found = contiguity(one('AAAABAAAAABAAAACCCCCCCCAAABAAAA'));
  expect(found.classes.map((row) => row.mergeWith)).toEqual([null, 1, null]);
  expect(contiguity(one('AAAA')).classes[0]).toMatchObject({ kappa: 0, mergeWith: null });
});

it('breaks sequences at holes, gaps and faults', () => {
  const rows = {
    hole: [1, 1, 1, 1, 2, 2],
    fromM: Float64Array.of(0, 2, 4, 12, 0, 2),
    toM: Float64Array.of(2, 4, 6, 14, 2, 4),
  };
  expect([...downHoleSequences(rows)]).toEqual([0, 0, 0, 1, 2, 2]); // gap of 6 m against 2 x 2 m
  expect([...downHoleSequences(rows, 6)]).toEqual([0, 0, 0, 0, 1, 1]);
  expect([...downHoleSequences(rows, 6, new Set([2]))]).toEqual([0, 0, 1, 1, 2, 2]);
});

it.each([
  ['shape', () => contiguity({ labels: [1], sequence: [], lengthM: new Float64Array(1) })],
  [
    'bad-parameter',
    () => contiguity({ labels: [1, 1], sequence: [0, 0], lengthM: Float64Array.of(1, NaN) }),
  ],
  [
    'bad-parameter',
    () => contiguity({ labels: [1, 0.5], sequence: [0, 0], lengthM: Float64Array.of(1, 1) }),
  ],
  [
    'shape',
    () => downHoleSequences({ hole: [1], fromM: new Float64Array(2), toM: new Float64Array(1) }),
  ],
  [
    'bad-parameter',
    () => downHoleSequences({ hole: [1], fromM: Float64Array.of(2), toM: Float64Array.of(2) }),
  ],
  [
    'bad-parameter',
    () =>
      downHoleSequences({ hole: [1, 1], fromM: Float64Array.of(2, 0), toM: Float64Array.of(3, 1) }),
  ],
  [
    'bad-parameter',
    () => downHoleSequences({ hole: [1], fromM: Float64Array.of(0), toM: Float64Array.of(1) }, -1),
  ],
  ['shape', () => transitionStatistics(new Float64Array(3), 2)],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});
