import { describe, expect, it } from 'vitest';
import { CENSORING } from '#kernels/populations/screen-rows.ts';
import { screenPopulation } from '#kernels/populations/screen-population.ts';
import { seededRandom, type Random } from '#kernels/random.ts';
import { loadReference } from '#tests/support/reference.ts';

const draws = (n: number, seed: number, draw: (random: Random, i: number) => number) => {
  const random = seededRandom(seed);
  return Float64Array.from({ length: n }, (_, i) => draw(random, i));
};
const lognormal = (median: number, logSd: number) => (random: Random) =>
  median * Math.exp(logSd * random.normal());
/** Share of the second in a mixture of two lognormals. */
const mixed = (share: number, a: [number, number], b: [number, number]) => (random: Random) =>
  lognormal(...(random.uniform() < share ? b : a))(random);
const verdictOf = (values: Float64Array) => screenPopulation(values).verdict;

describe('verdict on generated truth', () => {
  it.each([
    ['30 % at 16 times the grade', mixed(0.3, [0.5, 0.6], [8, 0.4])],
    ['half at 12 times the grade', mixed(0.5, [10, 0.6], [120, 0.6])],
    ['10 % at 20 times the grade', mixed(0.1, [1, 0.7], [20, 0.7])],
  ])('%s is mixed', (_, draw) => {
    for (const seed of [1, 2, 3]) expect(verdictOf(draws(600, seed, draw))).toBe('mixed');
  });

  it.each<[string, (random: Random) => number]>([
    ['one lognormal', lognormal(2, 0.8)],
    ['one wide lognormal, CV above 3', lognormal(2, 1.6)],
    ['an exponential grade', (random) => -Math.log(1 - random.uniform())],
    ['a normal grade', (random) => Math.max(0.05, 1 + 0.25 * random.normal())],
    ['a lognormal cut off at its median', (random) => Math.exp(0.8 * Math.abs(random.normal()))],
    [
      'grades rounded to a few steps',
      (random) => Math.max(0.01, Math.round(5 * Math.exp(0.8 * random.normal())) / 100),
    ],
  ])('%s is single', (_, draw) => {
    for (const seed of [1, 2, 3]) expect(verdictOf(draws(600, seed, draw))).toBe('single');
  });

  it('a shoulder is no mixture however many rows there are', () => {
    const shoulder = mixed(0.3, [1, 0.7], [1 * Math.exp(1.2), 0.7]); // D 1.7, one mode
    const found = screenPopulation(draws(40_000, 5, shoulder), null, null, { maxPopulations: 2 });
    expect(found.deltaBic).toBeGreaterThan(100);
    expect(found.verdict).not.toBe('mixed');
  });

  it('evidence of one kind only is suspect: a small clear population', () => {
    const found = screenPopulation(draws(1000, 8, mixed(0.04, [1, 0.5], [30, 0.4])));
    expect(found.verdict).toBe('suspect');
    expect(found.reasons.join(' ')).toMatch(/the smaller holds [34]\.\d %, under 5 %/);
  });

  it('29 rows are too few, 30 are not', () => {
    const values = draws(30, 4, lognormal(1, 0.5));
    expect(screenPopulation(values.subarray(0, 29))).toMatchObject({
      verdict: 'too-few',
      reasons: ['29 rows are too few: a verdict needs 30.'],
    });
    expect(verdictOf(values)).toBe('single');
  });

  it('finds what is known of published soil data: cobalt of the Jura in two groups', () => {
    // Co of the Jura set: -2 ln L falls by 94 from one to two normals on ln grade (R mclust 6.0.0)
    const set = loadReference('jura_prediction');
    const values = Float64Array.from(set.rows, (row) => Number(row['Co']));
    const found = screenPopulation(values);
    expect(found.deltaBic).toBeCloseTo(2 * (172.3255157 - 125.0877575) - 3 * Math.log(259), 2);
    expect(found.verdict).not.toBe('too-few');
  });
});

describe('one screen', () => {
  const values = draws(500, 12, mixed(0.3, [0.5, 0.6], [8, 0.4]));
  const found = screenPopulation(values);

  it('holds the populations, even odds and plots', () => {
    expect(found).toMatchObject({
      n: 500,
      nMeasured: 500,
      nBelow: 0,
      nAbove: 0,
      nMissing: 0,
      metres: null,
      chosenK: 2,
      effectiveN: 500,
    });
    const chosen = found.mixtures[1]?.components ?? [];
    expect(chosen[0]?.median).toBeCloseTo(0.5, 0);
    expect(chosen[1]?.share).toBeCloseTo(0.3, 1);
    expect(found.evenOdds).toBeGreaterThan(1.8);
    expect(found.evenOdds).toBeLessThan(4);
    expect(found.plot?.z.length).toBeLessThanOrEqual(400);
    expect(found.histogram?.counts.reduce((a, b) => a + b, 0)).toBeCloseTo(500, 9);
    expect(found.mixtures.map((fit) => fit.k)).toEqual([1, 2, 3, 4]);
  });

  it('gives its reasons in words', () => {
    expect(found.reasons[0]).toMatch(
      /^Two lognormal populations beat one by BIC \d+.* \(10 is very strong evidence\)\.$/,
    );
    expect(found.reasons[1]).toMatch(
      /^The sides at 0\.\d+ and \d\.\d+ stand apart \(Ashman D \d\.\d; 2 is clear\); the smaller holds \d+ %\.$/,
    );
    expect(found.reasons[2]).toMatch(
      /^(The distribution has more than one mode|No second mode is shown) \(dip 0\.\d{4}, nominal p .+\)\.$/,
    );
    expect(found.notes.join(' ')).toContain('no part of the verdict');
    expect(found.notes.join(' ')).toContain('not independent');
  });

  it('does not change with the unit', () => {
    const other = screenPopulation(values.map((v) => v * 10_000));
    expect(other.verdict).toBe(found.verdict);
    expect(other.deltaBic).toBeCloseTo(found.deltaBic ?? NaN, 4);
    expect(other.dip?.dip).toBeCloseTo(found.dip?.dip ?? NaN, 9);
  });

  it('is the same for the same seed and reports progress', () => {
    const seen: number[] = [];
    expect(
      screenPopulation(values, null, null, { onProgress: (share) => void seen.push(share) }),
    ).toEqual(found);
    expect(seen.at(-1)).toBe(1);
    expect(seen).toEqual([...seen].sort((a, b) => a - b));
    const stop = () => {
      throw new Error('cancelled');
    };
    expect(() => screenPopulation(values, null, null, { onProgress: stop })).toThrow('cancelled');
  });
});

describe('weights and censoring', () => {
  const values = draws(400, 3, lognormal(1, 0.7));

  it('gives statistics with and without length weights', () => {
    const lengths = values.map((v) => (v > 1 ? 1 : 3));
    const { summaries, metres, effectiveN, notes } = screenPopulation(values, lengths);
    const mean = values.reduce((sum, v) => sum + v, 0) / 400;
    const weighted =
      values.reduce((sum, v, i) => sum + v * (lengths[i] ?? NaN), 0) / (metres ?? NaN);
    expect(summaries?.unweighted.mean).toBeCloseTo(mean, 10);
    expect(summaries?.weighted?.mean).toBeCloseTo(weighted, 10);
    expect(metres).toBe(lengths.reduce((a, b) => a + b, 0));
    expect(effectiveN).toBeLessThan(400);
    expect(notes.join(' ')).toContain('weighted by length');
  });

  it('fits through values below detection instead of making a second population of them', () => {
    const limit = 0.5; // a third of the rows lie below
    const codes = Uint8Array.from(values, (v) =>
      v < limit ? CENSORING.below : CENSORING.measured,
    );
    const known = values.map((v) => Math.max(v, limit));
    const found = screenPopulation(known, null, codes);
    const [one] = found.mixtures[0]?.components ?? [];
    expect(found.nBelow).toBeGreaterThan(50);
    expect(found.nMeasured + found.nBelow).toBe(400);
    expect(found.verdict).toBe('single');
    expect(Math.abs(Math.log(one?.median ?? NaN))).toBeLessThan(0.12);
    expect(Math.abs((one?.logSd ?? NaN) - 0.7)).toBeLessThan(0.1);
    expect(found.notes.join(' ')).toContain('below detection');
  });

  it('leaves missing rows out and counts them', () => {
    const codes = new Uint8Array(400);
    codes[3] = 3;
    codes[4] = 4;
    const holed = values.slice();
    holed[9] = NaN;
    expect(screenPopulation(holed, null, codes)).toMatchObject({ n: 397, nMissing: 3 });
  });

  it('takes a few rows at the upper limit, refuses more than 1 %', () => {
    const codes = new Uint8Array(400);
    codes.fill(CENSORING.above, 0, 4);
    const found = screenPopulation(values, null, codes);
    expect(found).toMatchObject({ nAbove: 4, nMeasured: 396, n: 400 });
    expect(found.notes.join(' ')).toContain('above an upper limit');
    codes[10] = CENSORING.above;
    expect(() => screenPopulation(values, null, codes)).toThrow(
      expect.objectContaining({ code: 'right-censored' }),
    );
  });
});

describe('nothing to judge', () => {
  it.each<[string, Float64Array, Uint8Array | null, string]>([
    ['no rows', new Float64Array(0), null, 'No row has a value.'],
    ['only missing', new Float64Array(40).fill(NaN), null, 'No row has a value.'],
    ['equal values', new Float64Array(40).fill(2), null, 'All measured values are equal.'],
    [
      'all below detection',
      new Float64Array(40).fill(2),
      new Uint8Array(40).fill(1),
      'Every row is below detection.',
    ],
  ])('%s: too few, with the reason', (_, values, codes, reason) => {
    expect(screenPopulation(values, null, codes)).toMatchObject({
      verdict: 'too-few',
      reasons: [reason],
      mixtures: [],
      dip: null,
      chosenK: null,
    });
  });

  it('stays finite with one, two and eleven rows', () => {
    expect(screenPopulation(Float64Array.of(3))).toMatchObject({
      verdict: 'too-few',
      summaries: { unweighted: { mean: 3, cv: null } },
    });
    expect(screenPopulation(Float64Array.of(3, 4)).verdict).toBe('too-few');
    const eleven = screenPopulation(Float64Array.from({ length: 11 }, (_, i) => 1 + i));
    expect(eleven.verdict).toBe('too-few');
    expect(eleven.dip?.pValue?.p).toBeGreaterThan(0);
  });
});

const good = Float64Array.of(1, 2, 3);
it.each<[string, () => unknown]>([
  ['shape', () => screenPopulation(good, new Float64Array(2))],
  ['shape', () => screenPopulation(good, null, new Uint8Array(4))],
  ['not-positive', () => screenPopulation(Float64Array.of(1, 0))],
  ['not-positive', () => screenPopulation(Float64Array.of(1, -Infinity))],
  ['not-finite', () => screenPopulation(Float64Array.of(1, Infinity))],
  ['bad-parameter', () => screenPopulation(good, Float64Array.of(1, -1, 1))],
  ['bad-parameter', () => screenPopulation(good, Float64Array.of(1, NaN, 1))],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});
