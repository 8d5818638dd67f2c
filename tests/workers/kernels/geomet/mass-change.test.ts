import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { immobilePairs, lnRatio } from '#kernels/geomet/immobile-pairs.ts';
import { massChange, type Precursor } from '#kernels/geomet/mass-change.ts';
import { seededRandom } from '#kernels/random.ts';

/** Ten rows of Zr 100 ppm, Ti 3000 ppm, K 1.5 %, Cu 40 ppm. */
const precursor: Precursor = {
  elements: ['Zr', 'Ti', 'K', 'Cu'],
  parts: Float64Array.from({ length: 40 }, (_, i) => [100, 3000, 15_000, 40][i % 4]!),
  limitsPpm: [0.5, 50, 100, 5],
};

describe('mass change', () => {
  it('Zr 100 to 125 and K 1.5 to 3.0 %: enrichment .8, K +60 % (computed)', () => {
    const [change] = massChange(precursor, Float64Array.of(125, 3750, 30_000, 100), ['Zr']);
    expect(change?.enrichment).toBeCloseTo(0.8, 12);
    expect(change?.total).toBeCloseTo(-0.2, 12);
    expect(change?.relativeGains[2]).toBeCloseTo(0.6, 12);
    expect(change?.gainsPpm[2]).toBeCloseTo(9000, 8);
    expect(change).toMatchObject({ spread: 1, isDoubtful: false });
  });

  it('gives no ratio near the detection limit, but the gain itself', () => {
    const [change] = massChange(precursor, Float64Array.of(125, 3750, 30_000, 100), ['Zr']);
    // copper: 40 ppm before is under ten times its limit of 5
    expect(change?.relativeGains[3]).toBeNaN();
    expect(change?.gainsPpm[3]).toBeCloseTo(40, 10);
  });

  it('takes the geometric mean of several immobile elements and keeps their spread', () => {
    const row = Float64Array.of(200, 3000, 15_000, 40);
    const [change] = massChange(precursor, row, ['Zr', 'Ti']);
    expect(change?.enrichment).toBeCloseTo(Math.SQRT1_2, 12);
    expect(change?.spread).toBeCloseTo(2, 12);
  });

  it('finds nothing changed in the precursor itself, and in any dilution of it', () => {
    fc.assert(
      fc.property(fc.double({ min: 0.4, max: 3, noNaN: true }), (factor) => {
        const row = precursor.parts.slice(0, 4).map((value) => value * factor);
        const [change] = massChange(precursor, row, ['Zr', 'Ti']);
        expect(change?.enrichment).toBeCloseTo(1 / factor, 10);
        [0, 1, 2].forEach((i) => expect(change?.relativeGains[i]).toBeCloseTo(0, 10));
      }),
    );
  });

  it('flags what is hardly the same rock and has no answer without an immobile grade', () => {
    const rows = Float64Array.of(20, 3000, 1, 1, NaN, 3000, 1, 1, 400, 3000, NaN, 1);
    const [thin, none, thick] = massChange(precursor, rows, ['Zr']);
    expect(thin).toMatchObject({ enrichment: 5, isDoubtful: true });
    expect(none).toBeNull();
    expect(thick).toMatchObject({ enrichment: 0.25, isDoubtful: true });
    expect(thick?.relativeGains[2]).toBeNaN();
  });

  it('refuses few precursors, unknown elements, and grades that are none', () => {
    const row = Float64Array.of(100, 3000, 15_000, 40);
    const refuses = (code: string, run: () => unknown) =>
      expect(run).toThrow(expect.objectContaining({ code }));
    const few = { ...precursor, parts: precursor.parts.slice(0, 36) };
    refuses('too-few-rows', () => massChange(few, row, ['Zr']));
    refuses('bad-parameter', () => massChange(precursor, row, ['Y']));
    refuses('bad-parameter', () => massChange(precursor, row, []));
    refuses('shape', () => massChange(precursor, row.slice(1), ['Zr']));
    refuses('shape', () => massChange({ ...precursor, limitsPpm: [] }, row, ['Zr']));
    refuses('bad-parameter', () => massChange(precursor, Float64Array.of(-1, 1, 1, 1), ['Zr']));
    refuses('not-positive', () => massChange(precursor, Float64Array.of(0, 1, 1, 1), ['Zr']));
    const gaps = { ...precursor, parts: precursor.parts.map((v, i) => (i === 0 ? NaN : v)) };
    refuses('bad-parameter', () => massChange(gaps, row, ['Zr']));
  });
});

describe('immobile pairs', () => {
  /** Zr and Ti of one rock diluted at will, beside elements that wander. */
  const elements = ['Zr', 'Ti', 'Al', 'Nb', 'Th'];
  const random = seededRandom(3);
  const parts = Float64Array.from(
    Array.from({ length: 60 }, () => {
      const factor = 0.5 + random.uniform();
      const wander = () => Math.exp(0.4 * random.normal());
      const tight = () => Math.exp(0.02 * random.normal());
      return [
        100 * factor * tight(),
        3000 * factor * tight(),
        8e4 * wander(),
        10 * wander(),
        5 * wander(),
      ];
    }).flat(),
  );

  it('finds the pair whose ratio stays fixed, and that one alone', () => {
    const pairs = immobilePairs(parts, elements);
    expect(pairs).toHaveLength(10);
    expect(pairs[0]).toMatchObject({ first: 'Zr', second: 'Ti', isImmobile: true });
    expect(pairs[0]!.correlation).toBeGreaterThan(0.98);
    expect(pairs.slice(1).some(({ isImmobile }) => isImmobile)).toBe(false);
    pairs
      .slice(1)
      .forEach(({ variance }, i) => expect(variance).toBeGreaterThanOrEqual(pairs[i]!.variance));
  });

  it('asks for a line through the origin, not for a small variance alone', () => {
    const wandering = immobilePairs(parts, elements, { lowestShare: 1, leastCorrelation: 0.9 });
    expect(wandering.filter(({ isImmobile }) => isImmobile)).toHaveLength(1);
  });

  it('does not mind units: rescaling an element changes nothing', () => {
    const scaled = parts.map((value, i) => (i % 5 === 1 ? value / 1e4 : value));
    const pairs = immobilePairs(scaled, elements);
    immobilePairs(parts, elements).forEach((pair, i) => {
      expect(pairs[i]).toMatchObject({ first: pair.first, second: pair.second });
      expect(pairs[i]!.variance).toBeCloseTo(pair.variance, 10);
      expect(pairs[i]!.correlation).toBeCloseTo(pair.correlation ?? NaN, 10);
    });
  });

  it('counts a ratio that never changes as fixed', () => {
    const constant = Float64Array.from({ length: 30 }, (_, i) => [100, 3000, 5][i % 3]!);
    const [pair] = immobilePairs(constant, ['Zr', 'Ti', 'Th'], {
      lowestShare: 0.4,
      leastCorrelation: 0.9,
    });
    expect(pair).toMatchObject({ correlation: null, isImmobile: true });
    expect(pair?.variance).toBeCloseTo(0, 20);
  });

  it('refuses few rows, zeros and rules that are none', () => {
    expect(() => immobilePairs(parts.slice(0, 45), elements)).toThrow(
      'at least 10 rows of one unit, found 9',
    );
    const zero = parts.map((value, i) => (i === 7 ? 0 : value));
    expect(() => immobilePairs(zero, elements)).toThrow(
      expect.objectContaining({ code: 'not-positive' }),
    );
    expect(() => immobilePairs(parts, elements, { lowestShare: 0, leastCorrelation: 0.9 })).toThrow(
      /share in \(0, 1\]/,
    );
  });
});

describe('protolith axis', () => {
  it('is the log of a ratio, missing where a grade is', () => {
    const axis = lnRatio(Float64Array.of(20, NaN, 1), Float64Array.of(10, 1, 1));
    expect(axis[0]).toBeCloseTo(Math.LN2, 12);
    expect(axis[1]).toBeNaN();
    expect(axis[2]).toBe(0);
  });

  it('refuses zeros, infinities and unlike lengths', () => {
    expect(() => lnRatio(Float64Array.of(1, 0), Float64Array.of(1, 1))).toThrow('in row 1');
    expect(() => lnRatio(Float64Array.of(Infinity), Float64Array.of(1))).toThrow('in row 0');
    expect(() => lnRatio(Float64Array.of(1), new Float64Array(0))).toThrow(/as many values/);
  });
});
