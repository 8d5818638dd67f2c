import fc from 'fast-check';
import { expect, it } from 'vitest';
import { benjaminiHochberg, holm } from '#kernels/tables/multiple-tests.ts';

/** The fifteen p of the worked example in Benjamini & Hochberg (1995); public test suites print the same. */
const published = Float64Array.from([
  0.0001, 0.0004, 0.0019, 0.0095, 0.0201, 0.0278, 0.0298, 0.0344, 0.0459, 0.324, 0.4262, 0.5719,
  0.6528, 0.759, 1,
]);

it('rejects four of fifteen at .05 as the 1995 paper does, and three by a family-wise rule', () => {
  expect(benjaminiHochberg(published).filter((p) => p <= 0.05)).toHaveLength(4);
  expect(holm(published).filter((p) => p <= 0.05)).toHaveLength(3);
});

it('keeps the step thresholds .00625 .. .05 of eight tests', () => {
  const steps = Float64Array.from({ length: 8 }, (_, i) => ((i + 1) * 0.05) / 8);
  expect(benjaminiHochberg(steps).every((p) => Math.abs(p - 0.05) < 1e-15)).toBe(true);
});

it('never lowers a p, keeps their order and ignores the order of tests', () => {
  const list = fc.array(fc.double({ min: 0, max: 1, noNaN: true }), {
    minLength: 1,
    maxLength: 30,
  });
  fc.assert(
    fc.property(list, (values) => {
      const p = Float64Array.from(values);
      for (const adjust of [benjaminiHochberg, holm]) {
        const adjusted = adjust(p);
        adjusted.forEach((value, i) => {
          expect(value).toBeGreaterThanOrEqual(p[i]!);
          expect(value).toBeLessThanOrEqual(1);
          adjusted.forEach((other, j) => {
            if (p[i]! <= p[j]!) expect(value).toBeLessThanOrEqual(other);
          });
        });
        expect([...adjust(p.slice().reverse())].reverse()).toEqual([...adjusted]);
      }
    }),
  );
});

it('refuses what is no p and takes an empty list', () => {
  expect(() => holm(Float64Array.of(0.1, 1.2))).toThrow(
    'expected p in [0, 1], found 1.2 at test 1',
  );
  expect(benjaminiHochberg(new Float64Array(0))).toHaveLength(0);
});
