import { describe, expect, it } from 'vitest';
import { contactProfiles } from '#kernels/spatial/contact-profile.ts';
import { readContact } from '#kernels/spatial/contact-reading.ts';
import { categoryFrom } from '#kernels/tables/category.ts';
import { mannWhitneyPairs } from '#kernels/tables/rank-tests.ts';
import { welchTest } from '#kernels/tables/welch.ts';

const A = [2.1, 1.8, 2.4, 2.0, 1.9, 2.2, 1.7, 2.5, 2.0, 1.6];
const B = [0.6, 0.7, 0.5, 0.8, 0.55, 0.65, 1.8, 0.9, 0.7, 1.0];

/** Holes of metre composites; each a list of [code, grade]. */
function holes(list: readonly (readonly (readonly [string | null, number])[])[]) {
  const rows = list.flat();
  const starts = list.reduce((all, hole) => [...all, (all.at(-1) ?? 0) + hole.length], [0]);
  const depths = list.flatMap((hole) => hole.map((_, i) => i));
  return {
    intervals: {
      holeStarts: Int32Array.from(starts),
      fromM: Float64Array.from(depths),
      toM: Float64Array.from(depths, (d) => d + 1),
    },
    domains: categoryFrom(rows.map(([code]) => code)),
    values: Float64Array.from(rows, ([, grade]) => grade),
  };
}
const profilesOf = ({ intervals, domains, values }: ReturnType<typeof holes>) =>
  contactProfiles(intervals, domains, values, { compositeM: 1, seed: 1 });

/** Ten holes that cross A to B, two composites a side, both of the grade given. */
const crossings = A.map(
  (a, i) =>
    [
      ['A', a],
      ['A', a],
      ['B', B[i] ?? NaN],
      ['B', B[i] ?? NaN],
    ] as const,
);
const ten = holes(crossings);

describe('ten contacts of two kinds of grade', () => {
  const [profile] = profilesOf(ten);

  it('mean difference .962538, 4 of 1024 flips, p .003906 (computed)', () => {
    expect(profile).toMatchObject({ first: 'A', second: 'B', contacts: 10, contactsUsed: 10 });
    expect(profile?.test?.mean).toBeCloseTo(0.962538, 6);
    expect(Math.exp(profile?.test?.mean ?? NaN)).toBeCloseTo(2.618334, 5);
    expect(profile?.test).toMatchObject({ reached: 4, flips: 1024, enumerated: true });
    expect(profile?.test?.p).toBeCloseTo(0.003906, 6);
  });

  it('is hard', () => {
    expect(profile?.verdict).toBe('hard');
    expect(profile?.reason).toContain('59 % of the larger (p 0.004)');
  });

  it('bins one composite wide, negative in the first domain', () => {
    expect(profile?.bins).toHaveLength(20);
    expect(profile?.bins[9]).toMatchObject({ fromM: -1, toM: -0, n: 10 });
    expect(profile?.bins[9]?.mean).toBeCloseTo(2.02, 12);
    expect(profile?.bins[10]).toMatchObject({ fromM: 0, toM: 1, n: 10 });
    expect(profile?.bins[10]?.mean).toBeCloseTo(0.82, 12);
    expect(profile?.bins[12]).toMatchObject({ n: 0, mean: null, standardError: null });
  });

  it('turned upside down it is the same', () => {
    const over = holes(
      A.map(
        (a, i) =>
          [
            ['B', B[i] ?? NaN],
            ['B', B[i] ?? NaN],
            ['A', a],
            ['A', a],
          ] as const,
      ),
    );
    expect(profilesOf(over)[0]).toEqual(profile);
  });
});

describe('six contacts', () => {
  const [a, b] = [Float64Array.from(A.slice(0, 6)), Float64Array.from(B.slice(0, 6))];

  it('U 36, exact p .0021645 = 2 / C(12, 6), Welch t 14.536653 (computed: scipy)', () => {
    const [test] = mannWhitneyPairs([a, b]);
    expect(test?.u).toBe(36);
    expect(test?.exactP).toBeCloseTo(0.0021645, 7);
    expect(test?.exactP).toBeCloseTo(2 / 924, 15);
    expect(welchTest(a, b).t).toBeCloseTo(14.536653, 6);
  });

  it('ratio 3.287663 and no verdict under ten contacts (computed)', () => {
    const [profile] = profilesOf(holes(crossings.slice(0, 6)));
    expect(profile).toMatchObject({ contactsUsed: 6, verdict: null });
    expect(Math.exp(profile?.test?.mean ?? NaN)).toBeCloseTo(3.287663, 6);
    // All six differences point one way: 2 of 64 flips reach their mean.
    expect(profile?.test).toMatchObject({ reached: 2, flips: 64, p: 2 / 64 });
  });
});

describe('contacts', () => {
  it('a row between two contacts counts at the nearer one, once', () => {
    const rows = ['A', 'B', 'B', 'B', 'B', 'A'].map((code, i) => [code, i + 1] as const);
    const [profile] = profilesOf(holes([rows]));
    expect(profile?.contacts).toBe(2);
    expect(profile?.bins.slice(9).map(({ n }) => n)).toEqual([2, 2, 2, 0, 0, 0, 0, 0, 0, 0, 0]);
    expect(profile?.bins[10]?.mean).toBe(3.5);
  });

  it('an oblique contact brings composites nearer', () => {
    const { intervals, domains, values } = ten;
    const obliquity = new Float64Array(40).fill(0.5);
    const [profile] = contactProfiles(intervals, domains, values, {
      compositeM: 1,
      seed: 1,
      obliquity,
    });
    expect(profile?.bins[9]?.n).toBe(20);
  });

  it('lists pairs by number of contacts and passes missing grades by', () => {
    const [first, second] = profilesOf(
      holes([
        [
          ['A', 1],
          ['C', NaN],
        ],
        [
          ['A', 1],
          ['B', 2],
          ['A', 1],
        ],
      ]),
    );
    expect(first).toMatchObject({
      first: 'A',
      second: 'B',
      contacts: 2,
      contactsUsed: 2,
      verdict: null,
    });
    expect(second).toMatchObject({
      first: 'A',
      second: 'C',
      contacts: 1,
      contactsUsed: 0,
      test: null,
      nearMeans: null,
    });
    expect(second?.reason).toContain('10 are needed');
  });
});

describe('reading', () => {
  const test = (p: number) => ({ mean: 1, p, reached: 1, flips: 2, enumerated: true });
  const level = { first: 0, second: null };
  const step = { first: 2, second: 1 };
  it.each([
    ['hard', { contacts: 10, nearMeans: step, test: test(0.01), trend: level }],
    ['soft', { contacts: 10, nearMeans: step, test: test(0.05), trend: level }],
    [
      'gradational',
      { contacts: 10, nearMeans: step, test: test(0.01), trend: { first: -0.4, second: 0 } },
    ],
    [
      'gradational',
      { contacts: 10, nearMeans: { first: 1, second: 0.8 }, test: test(0.01), trend: level },
    ],
    [null, { contacts: 9, nearMeans: step, test: test(0.01), trend: level }],
  ])('%s', (verdict, evidence) => {
    expect(readContact(evidence).verdict).toBe(verdict);
  });
});

const { intervals, domains, values } = ten;
const options = { compositeM: 1, seed: 1 };
it.each([
  [
    'not-positive',
    () =>
      contactProfiles(
        intervals,
        domains,
        values.map((v, i) => (i === 3 ? 0 : v)),
        options,
      ),
  ],
  [
    'not-positive',
    () =>
      contactProfiles(
        intervals,
        domains,
        values.map(() => Infinity),
        options,
      ),
  ],
  ['shape', () => contactProfiles(intervals, domains, values.slice(1), options)],
  [
    'bad-parameter',
    () => contactProfiles(intervals, domains, values, { ...options, compositeM: 0 }),
  ],
  ['bad-parameter', () => contactProfiles(intervals, domains, values, { ...options, bins: 0 })],
  [
    'bad-parameter',
    () =>
      contactProfiles(intervals, domains, values, { ...options, obliquity: new Float64Array(40) }),
  ],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});
