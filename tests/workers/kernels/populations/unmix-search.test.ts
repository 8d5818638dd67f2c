import { describe, expect, it } from 'vitest';
import { normalQuantile } from '#kernels/normal.ts';
import { unmixGuard } from '#kernels/populations/unmix-guard.ts';
import { mixedness } from '#kernels/populations/mixedness.ts';
import { unmixInside, unmixSearch, type UnmixInput } from '#kernels/populations/unmix-search.ts';
import { prepareSplitters, type UnmixSplitter } from '#kernels/populations/unmix-splitters.ts';
import { seededRandom } from '#kernels/random.ts';
import { categoryFrom } from '#kernels/tables/category.ts';

const category = (name: string, labels: Iterable<string | null>): UnmixSplitter => ({
  name,
  kind: 'category',
  category: categoryFrom([...labels]),
});
const numeric = (name: string, values: Iterable<number>): UnmixSplitter => ({
  name,
  kind: 'numeric',
  values: Float64Array.from(values),
});

const quantilesOf = (n: number, median: number, sd: number) =>
  Array.from({ length: n }, (_, i) => Math.log(median) + sd * normalQuantile((i + 0.5) / n));
/** 700 of B (median .5, sd .6), then 300 of A (median 8, sd .4): fixed quantiles. */
const mixed = Float64Array.from([...quantilesOf(700, 0.5, 0.6), ...quantilesOf(300, 8, 0.4)]);
const truth = category(
  'truth',
  Array.from(mixed.keys(), (i) => (i < 700 ? 'B' : 'A')),
);
const ascending = mixed.slice().sort();
const oddEven = category(
  'rank',
  Array.from(mixed, (value) => (ascending.indexOf(value) % 2 ? 'even' : 'odd')),
);
/** Holes of 50 rows. */
const holes = Int32Array.from({ length: 21 }, (_, hole) => 50 * hole);
const options = { seed: 1, draws: 99 };

describe('guard by hand: 14 rows in two holes (computed, all 48 shifts)', () => {
  const y = Float64Array.of(0, 0.1, 0.2, 0.1, 2, 2.1, 1.9, 2.2, 0.1, 0, 0.2, 2, 2.1, 1.8);
  const splitters = [category('s1', 'aaaabbbbaaabbb'), category('s2', 'cdcdcdcdcdcdcd')];
  const { prepared } = prepareSplitters(splitters, [y], 1);
  const { effects, shifts, enumerated } = unmixGuard(
    [y],
    prepared,
    Int32Array.of(0, 8, 14),
    options,
  );

  it('epsilon squared .987595 and -.064009', () => {
    expect(effects[0]?.epsilonSquared).toBeCloseTo(0.987595, 6);
    expect(effects[1]?.epsilonSquared).toBeCloseTo(-0.064009, 6);
  });

  it('2 and 45 of 48 reach them: p .0417 and .9375', () => {
    expect([shifts, enumerated]).toEqual([48, true]);
    expect(effects[0]?.pAdjusted).toBeCloseTo(2 / 48, 12);
    expect(effects[1]?.pAdjusted).toBeCloseTo(45 / 48, 12);
  });
});

describe('two populations of known make', () => {
  const result = unmixSearch(
    { target: [mixed], holeStarts: holes, splitters: [oddEven, truth] },
    options,
  );

  it('mixing 687.7076 (computed)', () => {
    expect(result.mixing).toBeCloseTo(687.7076, 2);
    expect(mixedness(mixed, 1)).toBe(result.mixing);
  });

  it('the true labels explain .843583, .843426 and resolve all (computed)', () => {
    const split = [...result.splits, ...result.notShown].find(({ name }) => name === 'truth');
    expect(split?.etaSquared).toBeCloseTo(0.843583, 6);
    expect(split?.epsilonSquared).toBeCloseTo(0.843426, 6);
    expect(split?.classes.map(({ name, n, mixing }) => [name, n, mixing])).toEqual([
      ['A', 300, 0],
      ['B', 700, 0],
    ]);
    expect(split?.resolved).toBe(1);
  });

  it('odd and even ranks explain 5.1e-6 and resolve .02395 (computed), and are not shown', () => {
    const split = result.notShown.find(({ name }) => name === 'rank');
    expect(split?.etaSquared).toBeCloseTo(5.1e-6, 7);
    expect(split?.resolved).toBeCloseTo(0.02395, 3);
  });

  it('the best decile cut of ln grade on itself would score .8443 (computed), hence it is refused', () => {
    const self = numeric('self', mixed);
    expect(() => prepareSplitters([self], [mixed], 20)).toThrow(
      expect.objectContaining({ code: 'built-on-target' }),
    );
    // Past the refusal, with the order spoilt only where no cut looks.
    const other = Float64Array.from(mixed.keys());
    const { prepared } = prepareSplitters([self], [other.map((x) => Math.sin(x))], 20);
    expect(
      unmixGuard([mixed], prepared, holes, { seed: 1, draws: 1 }).effects[0]?.epsilonSquared,
    ).toBeCloseTo(0.8443, 4);
  });
});

/** Runs of two rocks in 20 holes, high grade in one; depth and noise beside them. */
function deposit(): UnmixInput & { isHigh: boolean[] } {
  const random = seededRandom(8);
  const isHigh = Array.from(holes.subarray(1), () => {
    const [from, length] = [random.below(50), 10 + random.below(15)];
    return Array.from({ length: 50 }, (_, i) => i >= from && i < from + length);
  }).flat();
  const y = Float64Array.from(isHigh, (high) => (high ? 3 : 0) + 0.5 * random.normal());
  const noise = Float64Array.from(isHigh, () => random.normal());
  const rock = isHigh
    .map((high) => (random.uniform() < 0.03 ? !high : high))
    .map((high) => (high ? 'vein' : 'tuff'));
  return {
    target: [y],
    holeStarts: holes,
    isHigh,
    splitters: [
      numeric('noise', noise),
      category('rock', rock),
      numeric(
        'proxy',
        isHigh.map((high, i) => (i % 9 === 0 ? NaN : (high ? 10 : 4) + random.normal())),
      ),
      category(
        'one level',
        isHigh.map(() => 'x'),
      ),
    ],
  };
}

describe('a deposit with runs', () => {
  const input = deposit();
  const result = unmixSearch(input, options);

  it('lists what resolves, keeps noise back, and skips a single level', () => {
    expect(result.splits.map(({ name }) => name).sort()).toEqual(['proxy', 'rock']);
    expect(result.notShown.map(({ name }) => name)).toEqual(['noise']);
    expect(result.notShown[0]?.pAdjusted).toBeGreaterThan(0.05);
    expect(result.skipped.map(({ name }) => name)).toEqual(['one level']);
  });

  it('cuts the proxy between its two kinds and names what is not measured', () => {
    const proxy = result.splits.find(({ name }) => name === 'proxy');
    expect(proxy?.cut).toBeGreaterThan(4);
    expect(proxy?.cut).toBeLessThan(10);
    expect(proxy?.classes[2]).toMatchObject({ name: 'not logged', n: 112 });
    expect(proxy?.classes.reduce((sum, { n }) => sum + n, 0)).toBe(1000);
  });

  it('is the same for the same seed', () => {
    expect(unmixSearch(input, options)).toEqual(result);
  });

  it('searches once more inside a class, and no deeper', () => {
    const inside = unmixInside(input, result, { split: 'rock', className: 'tuff' }, options);
    expect(inside.depth).toBe(2);
    expect(inside.n).toBe(result.splits.find(({ name }) => name === 'rock')?.classes[0]?.n);
    expect(() => unmixInside(input, inside, { split: 'rock', className: 'tuff' }, options)).toThrow(
      'depth 2',
    );
    expect(() =>
      unmixInside(input, result, { split: 'rock', className: 'basalt' }, options),
    ).toThrow('basalt');
  });

  it('adds coordinates, whatever their order', () => {
    const [y] = input.target;
    if (!y) throw new Error('no target');
    const other = y.map((value, i) => -2 * value + (i % 3));
    const prepared = prepareSplitters([input.splitters[1]!], [y, other], 20).prepared;
    const effect = (target: Float64Array[]) =>
      unmixGuard(target, prepared, holes, options).effects[0]?.etaSquared;
    expect(effect([y, other])).toBeCloseTo(effect([other, y]) ?? NaN, 12);
  });
});

it('pools small levels as other', () => {
  const labels = Array.from({ length: 100 }, (_, i) =>
    i < 50 ? 'a' : i < 95 ? 'b' : i < 98 ? 'c' : null,
  );
  const { prepared } = prepareSplitters([category('rock', labels)], [new Float64Array(100)], 20);
  expect(prepared[0]?.candidates[0]?.classNames).toEqual(['a', 'b', 'other']);
  expect([...(prepared[0]?.binSizes ?? [])]).toEqual([50, 45, 5]);
});

it('one population has nothing to resolve', () => {
  const one = Float64Array.from(quantilesOf(1000, 2, 0.7));
  const result = unmixSearch({ target: [one], holeStarts: holes, splitters: [truth] }, options);
  expect(result.note).toMatch(/^Nothing to resolve/);
  expect(result.splits).toEqual([]);
  expect(mixedness(new Float64Array(30).fill(2), 1)).toBe(0);
});

it('says so when no splitter is left', () => {
  const result = unmixSearch(
    {
      target: [mixed],
      holeStarts: holes,
      splitters: [
        category(
          'x',
          Array.from(mixed, () => 'x'),
        ),
      ],
    },
    options,
  );
  expect(result.note).toContain('No splitter');
});

const short = Float64Array.of(1, 2, 3);
const abc = category('abc', 'abc');
it.each([
  ['shape', () => unmixSearch({ target: [], holeStarts: holes, splitters: [] }, options)],
  ['shape', () => prepareSplitters([truth], [short], 1)],
  ['shape', () => prepareSplitters([numeric('x', [1])], [short], 1)],
  ['bad-parameter', () => prepareSplitters([abc, abc], [short], 1)],
  [
    'not-finite',
    () => prepareSplitters([numeric('x', [1, Infinity, 0, 5])], [Float64Array.of(2, 1, 7, 4)], 1),
  ],
  ['too-few-groups', () => unmixGuard([short], [], Int32Array.of(0, 3), options)],
  [
    'too-few-rows',
    () =>
      unmixGuard(
        [short],
        prepareSplitters([abc], [short], 1).prepared,
        Int32Array.of(0, 3),
        options,
      ),
  ],
  [
    'constant',
    () =>
      unmixGuard(
        [new Float64Array(1000)],
        prepareSplitters([truth], [mixed], 1).prepared,
        holes,
        options,
      ),
  ],
  [
    'not-finite',
    () =>
      unmixGuard(
        [mixed.map((v, i) => (i ? v : NaN))],
        prepareSplitters([truth], [mixed], 1).prepared,
        holes,
        options,
      ),
  ],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});
