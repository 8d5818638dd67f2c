import { describe, expect, it } from 'vitest';
import { logNormalCdf, normalCdf, normalDensity, normalQuantile } from '#kernels/normal.ts';

const relative = (found: number, expected: number) =>
  Math.abs(found - expected) / Math.abs(expected);

describe('standard normal', () => {
  it.each([
    [-30, 4.906713927147908e-198],
    [-20, 2.7536241186061556e-89],
    [-8, 6.22096057427174e-16],
    [-5, 2.866515718791933e-7],
    [-3, 0.0013498980316300933],
    [-1, 0.15865525393145707],
    [0, 0.5],
    [1, 0.8413447460685429],
    [2, 0.9772498680518208],
    [3.6, 0.9998408914098424],
  ])('distribution function at %d (computed: scipy 1.10.1 norm.cdf)', (z, expected) => {
    expect(relative(normalCdf(z), expected)).toBeLessThan(1e-12);
  });

  it.each([
    [1e-300, -37.0470962993612],
    [1e-20, -9.262340089798409],
    [1e-8, -5.612001244174789],
    [0.001, -3.090232306167813],
    [0.02425, -1.972961051311885],
    [0.25, -0.6744897501960817],
    [0.975, 1.959963984540054],
    [0.999, 3.090232306167813],
  ])('quantile at %d (computed: scipy 1.10.1 norm.ppf)', (p, expected) => {
    expect(relative(normalQuantile(p), expected)).toBeLessThan(1e-12);
  });

  it.each([
    [-100, -5005.524208694205],
    [-40, -804.6084420137539],
    [-30, -454.32124395634327],
    [-20, -203.9171553710973],
    [0, -0.6931471805599453],
    [5, -2.8665161296376294e-7],
  ])(
    'ln of the distribution function at %d (computed: scipy 1.10.1 norm.logcdf)',
    (z, expected) => {
      expect(relative(logNormalCdf(z), expected)).toBeLessThan(1e-9);
    },
  );

  it('has density 1/sqrt(2 pi) at 0', () => {
    expect(normalDensity(0)).toBeCloseTo(0.3989422804014327, 15);
  });

  it('inverts itself and is symmetric', () => {
    for (const p of [1e-12, 0.01, 0.3, 0.5, 0.8]) {
      expect(relative(normalCdf(normalQuantile(p)), p)).toBeLessThan(1e-12);
    }
    for (const p of [0.01, 0.2]) expect(normalQuantile(1 - p)).toBeCloseTo(-normalQuantile(p), 12);
  });

  it('gives the infinities at 0 and 1 and refuses the rest', () => {
    expect([normalQuantile(0), normalQuantile(1)]).toEqual([-Infinity, Infinity]);
    for (const p of [-0.1, 1.1, NaN]) {
      expect(() => normalQuantile(p)).toThrow(/probability in \[0, 1\]/);
    }
  });
});

it('takes the infinities to their limits and refuses NaN; -0 is 0', () => {
  expect([-Infinity, Infinity].map(normalDensity)).toEqual([0, 0]);
  expect([-Infinity, -0, Infinity].map(normalCdf)).toEqual([0, 0.5, 1]);
  expect([-Infinity, Infinity].map(logNormalCdf)).toEqual([-Infinity, 0]);
  expect([-0, 1].map(normalQuantile)).toEqual([-Infinity, Infinity]);
  for (const of of [normalDensity, normalCdf, logNormalCdf])
    expect(() => of(NaN)).toThrow(expect.objectContaining({ code: 'not-finite' }));
  expect(() => normalQuantile(NaN)).toThrow(expect.objectContaining({ code: 'bad-parameter' }));
});
