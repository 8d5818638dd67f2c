import fc from 'fast-check';
import { expect, it } from 'vitest';
import {
  chiSquareTail,
  fTail,
  incompleteBeta,
  kolmogorovTail,
  logGamma,
  studentTwoSided,
  upperGamma,
} from '#kernels/tables/special-functions.ts';

const relative = (found: number, expected: number) => Math.abs(found / expected - 1);

it('gives factorials and the gamma of one half', () => {
  expect(logGamma(1)).toBeCloseTo(0, 14);
  expect(relative(logGamma(11), Math.log(3_628_800))).toBeLessThan(1e-14);
  expect(relative(logGamma(0.5), Math.log(Math.PI) / 2)).toBeLessThan(1e-14);
});

it('keeps the duplication formula of the gamma function (Abramowitz & Stegun 6.1.18)', () => {
  fc.assert(
    fc.property(fc.double({ min: 0.05, max: 500, noNaN: true }), (x) => {
      const left = logGamma(2 * x);
      const right =
        (2 * x - 1) * Math.LN2 - 0.5 * Math.log(Math.PI) + logGamma(x) + logGamma(x + 0.5);
      expect(Math.abs(left - right)).toBeLessThan(1e-12 * Math.max(1, Math.abs(left)));
    }),
  );
});

it.each([
  // Upper 5 % and 1 % points, tables in any statistics handbook (three decimals).
  [3.841, 1, 0.05],
  [5.991, 2, 0.05],
  [9.488, 4, 0.05],
  [18.307, 10, 0.05],
  [124.342, 100, 0.05],
  [6.635, 1, 0.01],
  [7.815, 3, 0.05],
])('chi-square %f with df %i leaves %f', (value, df, p) => {
  expect(chiSquareTail(value, df)).toBeCloseTo(p, 4);
});

it.each([
  // Upper 5 % points of F, tables in any statistics handbook.
  [161.448, 1, 1, 0.05],
  [3.708, 3, 10, 0.05],
  [2.183, 12, 24, 0.05],
  [4.001, 1, 60, 0.05],
])('F %f with df %i and %i leaves %f', (value, df1, df2, p) => {
  expect(fTail(value, df1, df2)).toBeCloseTo(p, 4);
});

it('has the exact chi-square tail for 2 degrees of freedom, far out too', () => {
  for (const x of [0.1, 1, 10, 100, 700]) {
    expect(relative(chiSquareTail(x, 2), Math.exp(-x / 2))).toBeLessThan(1e-12);
  }
});

it('has the exact F tail for 2 degrees of freedom above: (1 + 2F/m)^(-m/2)', () => {
  for (const f of [0.1, 1, 10, 1000]) {
    expect(relative(fTail(f, 2, 7), (1 + (2 * f) / 7) ** -3.5)).toBeLessThan(1e-12);
  }
});

it('has the Cauchy tail for Student t with 1 degree of freedom', () => {
  expect(studentTwoSided(1, 1)).toBeCloseTo(0.5, 13);
  expect(studentTwoSided(-3, 1)).toBeCloseTo(1 - (2 / Math.PI) * Math.atan(3), 13);
});

it('keeps the symmetry of the incomplete beta function', () => {
  const shape = fc.double({ min: 0.2, max: 300, noNaN: true });
  fc.assert(
    fc.property(fc.double({ min: 0.001, max: 0.999, noNaN: true }), shape, shape, (x, a, b) => {
      expect(incompleteBeta(x, a, b) + incompleteBeta(1 - x, b, a)).toBeCloseTo(1, 9);
    }),
  );
});

it('has the 5 % and 1 % points of the Kolmogorov law (1.3581, 1.6276, Smirnov 1948 table)', () => {
  expect(kolmogorovTail(1.3581)).toBeCloseTo(0.05, 4);
  expect(kolmogorovTail(1.6276)).toBeCloseTo(0.01, 4);
});

it('joins the two series of the Kolmogorov law and falls from 1 to 0', () => {
  expect(kolmogorovTail(1.1 - 1e-12)).toBeCloseTo(kolmogorovTail(1.1), 10);
  expect(kolmogorovTail(0)).toBe(1);
  expect(kolmogorovTail(8)).toBeLessThan(1e-50);
});

it('refuses arguments outside the domain', () => {
  expect(() => logGamma(0)).toThrow('expected an argument > 0, found 0');
  expect(() => upperGamma(1, -1)).toThrow('expected shape > 0 and argument >= 0, found 1, -1');
  expect(() => incompleteBeta(1.5, 1, 1)).toThrow('expected x in [0, 1] and shapes > 0');
  expect(() => kolmogorovTail(NaN)).toThrow('expected a value >= 0, found NaN');
});

it('ends at the edges', () => {
  expect(upperGamma(3, 0)).toBe(1);
  expect(upperGamma(3, Infinity)).toBe(0);
  expect(incompleteBeta(0, 2, 3)).toBe(0);
  expect(incompleteBeta(1, 2, 3)).toBe(1);
  expect(fTail(Infinity, 2, 3)).toBe(0);
});
