import { describe, expect, it } from 'vitest';
import { normalCdf } from '#kernels/normal.ts';
import {
  controlRules,
  materialBias,
  swapCandidates,
  withSiteSd,
} from '#kernels/quality/reference-material.ts';
import { seededRandom } from '#kernels/random.ts';

const certificate = { name: 'Standard A', value: 5, sd: 0.1 };
const fromZ = (...z: number[]) => Float64Array.from(z, (value) => 5 + 0.1 * value);
const rulesOf = (...z: number[]) =>
  controlRules(fromZ(...z), certificate).hits.map(({ rule, from, to, side }) => [
    rule,
    from,
    to,
    side,
  ]);

describe('controlRules', () => {
  it.each([
    [[0.5, -1, 1.9, -1.9], []],
    [[0, 3.1, 0], [['beyond-3-sd', 1, 1, 1]]],
    [[0, -3.1], [['beyond-3-sd', 1, 1, -1]]],
    [
      [2.1, 0, 2.1],
      [
        ['beyond-2-sd', 0, 0, 1],
        ['beyond-2-sd', 2, 2, 1],
      ],
    ],
    [
      [2.1, -2.1],
      [
        ['beyond-2-sd', 0, 0, 1],
        ['beyond-2-sd', 1, 1, -1],
      ],
    ],
    [
      [2.1, 2.2],
      [
        ['beyond-2-sd', 0, 0, 1],
        ['two-beyond-2-sd', 0, 1, 1],
      ],
    ],
    [[1, 1, 1, 1, 1, 1, 1], []],
    [[-1, 1, 1, 1, 1, 1, 1, 1, 1, -1], [['eight-on-one-side', 1, 8, 1]]],
    [[-1, -1, -1, -1, -1, -1, -1, -1, -1], [['eight-on-one-side', 0, 8, -1]]],
  ])('z %j: %j (by hand from the rules)', (z, hits) => {
    expect(rulesOf(...z)).toEqual(hits);
  });

  it('marks warnings and failures, and counts them', () => {
    const found = controlRules(fromZ(0, 2.5, 2.5, 0, -2.5, 0, 4), certificate);
    expect([...found.status]).toEqual([0, 2, 2, 0, 1, 0, 2]);
    expect(found).toMatchObject({ nUsed: 7, nMissing: 0, nFailed: 3 });
  });

  it('passes over missing results: those beside them are in a row', () => {
    const found = controlRules(Float64Array.of(5.25, NaN, 5.25), certificate);
    expect([...found.status]).toEqual([2, 0, 2]);
    expect(found).toMatchObject({ nUsed: 2, nMissing: 1 });
    expect(found.z[1]).toBeNaN();
  });

  it('fails results in control as rarely as their tails say: .0455003 and .0026998 (computed: scipy)', () => {
    expect(2 * normalCdf(-2)).toBeCloseTo(0.0455003, 7);
    expect(2 * normalCdf(-3)).toBeCloseTo(0.0026998, 7);
    // Two or three of three past +2 or past -2, a rule not used here: .0031 (computed).
    const tail = normalCdf(-2);
    expect(2 * (3 * tail ** 2 * (1 - tail) + tail ** 3)).toBeCloseTo(0.0031, 4);
    const random = seededRandom(12);
    const results = Float64Array.from({ length: 20_000 }, () => 5 + 0.1 * random.normal());
    const { hits, z } = controlRules(results, certificate);
    const count = (rule: string) => hits.filter((hit) => hit.rule === rule).length;
    expect(count('beyond-3-sd')).toBe(z.filter((value) => Math.abs(value) > 3).length);
    expect(Math.abs(count('beyond-3-sd') / 20_000 - 0.0027)).toBeLessThan(0.0015);
    expect(Math.abs(count('two-beyond-2-sd') / 20_000 - 2 * 0.02275 ** 2)).toBeLessThan(0.0012);
  });

  it.each([
    ['too-few-rows', [], certificate],
    ['too-few-rows', [NaN], certificate],
    ['not-finite', [5, Infinity], certificate],
    ['bad-parameter', [5], { ...certificate, sd: 0 }],
    ['bad-parameter', [5], { ...certificate, sd: NaN }],
    ['bad-parameter', [5], { ...certificate, value: -0 }],
  ] as const)('refuses with %s: %j', (code, results, material) => {
    expect(() => controlRules(Float64Array.from(results), material)).toThrow(
      expect.objectContaining({ code }),
    );
  });
});

describe('materialBias', () => {
  it('C 5.00, mean 5.12, s .15, n 20: +2.4 %, t 3.5777 (computed)', () => {
    const half = 0.15 * Math.sqrt(19 / 20);
    const results = Float64Array.from(
      { length: 20 },
      (_, i) => 5.12 + (i % 2 === 0 ? half : -half),
    );
    const found = materialBias(results, 5);
    expect(found.biasPercent).toBeCloseTo(2.4, 9);
    expect(found.sd).toBeCloseTo(0.15, 9);
    expect(found.t).toBeCloseTo(3.5777, 4);
    expect(found.nominalP).toBeCloseTo(0.0020077, 6);
  });

  it('five results against 5 (computed: scipy ttest_1samp)', () => {
    const found = materialBias(Float64Array.of(4.9, 5.1, NaN, 5.3, 5, 5.4), 5);
    expect(found.t).toBeCloseTo(1.509658824848144, 9);
    expect(found.nominalP).toBeCloseTo(0.2056399589507077, 9);
    expect(found.n).toBe(5);
  });

  it('of results that do not vary', () => {
    expect(materialBias(Float64Array.of(5, 5, 5), 5)).toMatchObject({
      biasPercent: 0,
      t: 0,
      nominalP: 1,
    });
    expect(materialBias(Float64Array.of(5.1, 5.1), 5)).toMatchObject({ t: null, nominalP: 0 });
  });

  it.each([
    ['too-few-rows', [5], 5],
    ['too-few-rows', [5, NaN], 5],
    ['not-finite', [5, -Infinity], 5],
    ['bad-parameter', [5, 6], 0],
    ['bad-parameter', [5, 6], NaN],
  ] as const)('refuses with %s: %j against %d', (code, results, value) => {
    expect(() => materialBias(Float64Array.from(results), value)).toThrow(
      expect.objectContaining({ code }),
    );
  });
});

describe('withSiteSd', () => {
  it('takes the sd of twenty results or more', () => {
    const results = Float64Array.from({ length: 20 }, (_, i) => 5 + (i % 2 === 0 ? 0.2 : -0.2));
    const found = withSiteSd(certificate, results);
    expect(found.sd).toBeCloseTo(0.2 * Math.sqrt(20 / 19), 12);
    expect(found).toMatchObject({ name: 'Standard A', value: 5 });
    expect(() => withSiteSd(certificate, results.subarray(1))).toThrow(
      expect.objectContaining({ code: 'too-few-rows', detail: { found: 19 } }),
    );
    expect(() => withSiteSd(certificate, new Float64Array(20).fill(5))).toThrow(
      expect.objectContaining({ code: 'singular' }),
    );
  });
});

describe('swapCandidates', () => {
  const others = [
    { name: 'B', value: 2, sd: 0.1 },
    { name: 'C', value: 2.2, sd: 0.1 },
    { name: 'D', value: 9, sd: 1 },
  ];

  it('names materials the result would fit, the nearest first', () => {
    expect(swapCandidates(2.15, others)).toEqual(['C', 'B']);
    expect(swapCandidates(4, others)).toEqual([]);
  });

  it('refuses a result or certificate that is none', () => {
    expect(() => swapCandidates(NaN, others)).toThrow(
      expect.objectContaining({ code: 'not-finite' }),
    );
    expect(() => swapCandidates(1, [{ name: 'E', value: 1, sd: 0 }])).toThrow(
      expect.objectContaining({ code: 'bad-parameter' }),
    );
  });
});
