import { describe, expect, it } from 'vitest';
import { consensus } from '#kernels/clustering/consensus.ts';
import { gapStatistic, type GapInput } from '#kernels/clustering/gap-statistic.ts';
import { kMeans } from '#kernels/clustering/k-means.ts';
import { bestJaccard, bootstrapStability, type Regroup } from '#kernels/clustering/stability.ts';
import { seededRandom } from '#kernels/random.ts';

/** 50 rows around each centre, sd .5. */
function blobs(centres: [number, number][], seed = 1): Float64Array[] {
  const random = seededRandom(seed);
  return [0, 1].map((j) =>
    Float64Array.from(
      { length: 50 * centres.length },
      (_, i) => centres[i % centres.length]![j]! + 0.5 * random.normal(),
    ),
  );
}
const THREE_CENTRES: [number, number][] = [
  [0, 0],
  [4, 0],
  [2, 4],
];
const three = blobs(THREE_CENTRES);

describe('gap statistic', () => {
  // The same rows by numpy and scikit-learn's k-means, 100 references.
  it.each([
    [1, [-0.004, 0.184, 1.523, 1.258, 1.192]],
    [2, [0.007, 0.266, 1.612, 1.372, 1.284]],
  ])('of three blobs, draw %i, has the gaps computed in numpy and proposes 3', (seed, gaps) => {
    const columns = blobs(THREE_CENTRES, seed);
    const { rows, suggestedK } = gapStatistic({
      ...{ columns, kTo: 5, seed: 1, references: 30, restarts: 4 },
    });
    expect(suggestedK).toBe(3);
    // Means of 30 and 100 references of sd .055 differ by .011 (1 sd).
    rows.forEach(({ gap }, i) => expect(Math.abs(gap! - gaps[i]!)).toBeLessThan(0.045));
    // Two other draws of the blobs, by numpy: gaps of draws have an sd of .08 to .12.
    for (const other of [
      [0.062, 0.272, 1.662, 1.398, 1.334],
      [0.088, 0.291, 1.659, 1.382, 1.327],
    ])
      rows.forEach(({ gap }, i) => expect(Math.abs(gap! - other[i]!)).toBeLessThan(0.24));
    const mean = rows.reduce((sum, { standardError }) => sum + standardError, 0) / 5;
    expect(Math.abs(mean - 0.055)).toBeLessThan(0.015);
  });

  it('of one cloud proposes 1, repeats with the seed, and ignores the unit', () => {
    const columns = blobs([[0, 0]], 3);
    const input: GapInput = { columns, kTo: 3, seed: 5, references: 10, restarts: 3 };
    const found = gapStatistic(input);
    expect(found.suggestedK).toBe(1);
    expect(gapStatistic(input)).toEqual(found);
    const scaled = gapStatistic({ ...input, columns: columns.map((x) => x.map((v) => 8 * v)) });
    scaled.rows.forEach(({ gap }, i) => expect(gap).toBeCloseTo(found.rows[i]!.gap!, 9));
  });

  it.each<[string, Partial<GapInput>]>([
    ['bad-parameter', { kTo: 0 }],
    ['bad-parameter', { references: 1.5 }],
    ['too-few-rows', { columns: [new Float64Array(9).fill(1)], kTo: 2 }],
    ['not-finite', { columns: [Float64Array.of(1, Infinity)] }],
  ])('refuses %s', (code, change) => {
    expect(() =>
      gapStatistic({ columns: three, kTo: 2, seed: 1, references: 2, ...change }),
    ).toThrow(expect.objectContaining({ code }));
  });
});

it('the Jaccard index of {1,2,3} and {2,3,4} is a half', () => {
  // Rows 0..3 are drawn, row 1 twice; the old group is rows 0-2, the new one rows 1-3.
  const best = bestJaccard([1, 1, 1, 2], [0, 1, 1, 2, 3], [5, 7, 7, 7, 7]);
  expect(best.get(1)).toBe(0.5);
  expect(best.get(2)).toBeCloseTo(1 / 3, 12);
});

/** Ten holes of 15 rows, each with rows of every blob. */
const hole = Array.from({ length: 150 }, (_, row) => Math.floor(row / 15));
const again =
  (columns: Float64Array[], k: number): Regroup =>
  (rows) =>
    kMeans({
      columns: columns.map((x) => Float64Array.from(rows, (row) => x[row]!)),
      k,
      seed: 1,
      restarts: 3,
    }).labels;
const labels = kMeans({ columns: three, k: 3, seed: 1 }).labels;

describe('stability by holes', () => {
  it('real groups come back, arbitrary ones do not', () => {
    const real = bootstrapStability({
      labels,
      hole,
      regroup: again(three, 3),
      seed: 1,
      resamples: 12,
    });
    expect(real.map(({ reading }) => reading)).toEqual(new Array(3).fill('highly stable'));
    const random = seededRandom(4);
    const arbitrary = Array.from({ length: 150 }, () => 1 + random.below(3));
    const poor = bootstrapStability({
      labels: arbitrary,
      hole,
      regroup: again(three, 3),
      seed: 1,
      resamples: 12,
    });
    poor.forEach(({ reading, jaccard }) =>
      expect([reading, jaccard! < 0.4]).toEqual(['dissolved', true]),
    );
  });

  it('is 1 when the grouping depends on the row alone, and skips resamples without the group', () => {
    const own = Array.from(hole, (id) => (id === 0 ? 2 : 1));
    const found = bootstrapStability({
      labels: own,
      hole,
      regroup: (rows) => Array.from(rows, (row) => own[row]!),
      seed: 2,
      resamples: 40,
    });
    expect(found.map(({ jaccard }) => jaccard)).toEqual([1, 1]);
    expect(found[0]!.resamples).toBe(40);
    expect(found[1]!.resamples).toBeLessThan(40);
  });
});

describe('consensus', () => {
  it('has no ambiguous pairs where every regrouping agrees, many where it is a lottery', () => {
    const clear = consensus({ hole, regroup: again(three, 3), seed: 1, resamples: 12 });
    expect(clear.ambiguous).toBe(0);
    clear.together.forEach((value) => expect([0, 1]).toContain(value));
    const lottery: Regroup = (rows, b) => {
      const random = seededRandom(b);
      return Array.from(rows, () => 1 + random.below(2));
    };
    expect(consensus({ hole, regroup: lottery, seed: 1, resamples: 12 }).ambiguous).toBeGreaterThan(
      0.9,
    );
  });

  it('compares a fixed draw of rows and never counts unassigned rows as together', () => {
    const found = consensus({
      hole,
      regroup: (rows) => new Uint8Array(rows.length),
      seed: 1,
      resamples: 2,
      maxRows: 10,
    });
    expect(found.rows).toHaveLength(10);
    expect(found.together.every((value) => value === 0 || Number.isNaN(value))).toBe(true);
  });
});

it.each([
  [
    'too-few-rows',
    () => bootstrapStability({ labels: [1, 1], hole: [3, 3], regroup: (rows) => rows, seed: 1 }),
  ],
  [
    'shape',
    () => bootstrapStability({ labels: [1], hole: [3, 4], regroup: (rows) => rows, seed: 1 }),
  ],
  [
    'shape',
    () => bootstrapStability({ labels: [1, 2], hole: [3, 4], regroup: () => [1], seed: 1 }),
  ],
  [
    'bad-parameter',
    () => bootstrapStability({ labels: [1, -2], hole: [3, 4], regroup: (rows) => rows, seed: 1 }),
  ],
  [
    'bad-parameter',
    () =>
      bootstrapStability({
        labels: [1, 2],
        hole: [3, 4],
        regroup: (rows) => rows,
        seed: 1,
        resamples: 0,
      }),
  ],
  ['too-few-rows', () => consensus({ hole: [1], regroup: (rows) => rows, seed: 1 })],
  ['bad-parameter', () => consensus({ hole: [1, 2], regroup: (rows) => rows, seed: 1, share: 0 })],
  ['shape', () => consensus({ hole: [1, 2], regroup: () => [], seed: 1 })],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});
