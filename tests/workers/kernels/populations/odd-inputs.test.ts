import fc from 'fast-check';
import { expect, it } from 'vitest';
import { KernelError } from '#kernels/kernel-error.ts';
import { dipTest } from '#kernels/populations/dip-test.ts';
import { partitionAt } from '#kernels/populations/inflection.ts';
import { mixtureData } from '#kernels/populations/mixture-data.ts';
import { andersonDarling, lilliefors } from '#kernels/populations/normality.ts';
import { screenPopulation } from '#kernels/populations/screen-population.ts';
import { shapiroWilk } from '#kernels/populations/shapiro-wilk.ts';
import { decileAnalysis, topCutTable } from '#kernels/populations/top-cuts.ts';

/** Any double, with the awkward ones often. */
const value = fc.oneof(
  fc.double({ min: 1e-6, max: 1e6, noNaN: true }),
  fc.constantFrom(0, -0, 1, 1, 2, 5e-324, 1e-300, 1e300, NaN, Infinity, -Infinity, -4),
);
const usual = fc.oneof(
  fc.double({ min: 1e-6, max: 1e6, noNaN: true }),
  fc.constantFrom(0.01, 1, 1, 2, 5e-324, 1e300),
);
const list = fc.oneof(
  fc.array(value, { maxLength: 14 }),
  fc.array(usual, { minLength: 8, maxLength: 60 }),
);

const isFiniteDeep = (x: unknown): boolean => {
  if (typeof x === 'number') return Number.isFinite(x);
  if (x instanceof Float64Array) return x.every(Number.isFinite);
  if (Array.isArray(x)) return x.every(isFiniteDeep);
  return x === null || typeof x !== 'object' || Object.values(x).every(isFiniteDeep);
};

function answersOrRefuses(call: () => unknown): void {
  try {
    expect(call()).toSatisfy(isFiniteDeep);
  } catch (error) {
    if (!(error instanceof KernelError)) throw error;
    expect(error.message).not.toBe('');
  }
}

it.each<[string, (values: number[]) => unknown]>([
  ['dip', (values) => dipTest(values)],
  ['Anderson-Darling', (values) => andersonDarling(values)],
  ['Lilliefors', (values) => lilliefors(values)],
  ['Shapiro-Wilk', (values) => shapiroWilk(values)],
  ['top cuts', (values) => topCutTable(values, [1, 10])],
  ['deciles', (values) => decileAnalysis(values)],
  ['partition', (values) => partitionAt(mixtureData(values.map(Math.log)), 0.3)],
])('%s: a refusal with a reason, or finite answers', (_, kernel) => {
  fc.assert(
    fc.property(list, (values) => answersOrRefuses(() => kernel(values))),
    { numRuns: 300, seed: 20260101 },
  );
});

it('screen: a refusal with a reason, or finite answers', () => {
  fc.assert(
    fc.property(list, (values) =>
      answersOrRefuses(() =>
        screenPopulation(Float64Array.from(values), null, null, { maxPopulations: 2 }),
      ),
    ),
    { numRuns: 120, seed: 20260101 },
  );
});
