import fc from 'fast-check';
import { expect, it } from 'vitest';
import {
  gaussianMixture,
  type GaussianMixtureInput,
} from '#kernels/clustering/gaussian-mixture.ts';
import { mixtureMembership } from '#kernels/clustering/mixture-membership.ts';
import { COVARIANCE_FAMILIES, mixtureParameterCount } from '#kernels/clustering/mixture-model.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { seededRandom } from '#kernels/random.ts';

/** Rows of two groups, sd 1 and 2, 8 apart in the first of p coordinates. */
function twoGroups(n: number, p: number, seed = 1): Float64Array[] {
  const random = seededRandom(seed);
  return Array.from({ length: p }, (_, j) =>
    Float64Array.from({ length: n }, (__, i) =>
      i % 3 === 0 ? (j === 0 ? 8 : 0) + 2 * random.normal() : random.normal(),
    ),
  );
}

const fit = (change: Partial<GaussianMixtureInput>) =>
  gaussianMixture({
    columns: twoGroups(300, 2),
    k: 2,
    family: 'full',
    seed: 1,
    starts: 3,
    ...change,
  });

it.each([
  ['full', 3, 4, 44], // K - 1 + Kp + K p (p + 1) / 2, worked by hand
  ['diagonal', 3, 4, 26],
  ['spherical', 3, 4, 17],
  ['tied', 3, 4, 24],
] as const)('%s with %i groups of %i coordinates has %i parameters', (family, k, p, count) => {
  expect(mixtureParameterCount(family, k, p)).toBe(count);
});

it('BIC at ln L -100, n 50 and 44 parameters is 372.129 (computed)', () => {
  const { bic, logLik, parameters, nUsed } = fit({
    columns: twoGroups(50, 4),
    k: 3,
    rowsPerParameter: 1,
  });
  expect([parameters, nUsed]).toEqual([44, 50]);
  expect(bic + 2 * logLik + 200).toBeCloseTo(372.129, 3);
});

it.each(COVARIANCE_FAMILIES)('%s: with one group it is the closed form', (family) => {
  const columns = [Float64Array.of(0, 2, 4, 6, 1, 3), Float64Array.of(1, 0, 3, 2, 5, 7)];
  const { model, logLik, own } = fit({ columns, k: 1, family, rowsPerParameter: 1 });
  const mean = columns.map((x) => x.reduce((a, b) => a + b, 0) / 6);
  const moment = (a: number, b: number) =>
    columns[a]!.reduce((sum, x, i) => sum + (x - mean[a]!) * (columns[b]![i]! - mean[b]!), 0) / 6;
  const both = (moment(0, 0) + moment(1, 1)) / 2;
  const axial = [moment(0, 0), 0, moment(1, 1)];
  const expected = {
    full: [moment(0, 0), moment(0, 1), moment(1, 1)],
    tied: [moment(0, 0), moment(0, 1), moment(1, 1)],
    diagonal: axial,
    spherical: [both, 0, both],
  };
  [...model.covariances].forEach((value, i) => expect(value).toBeCloseTo(expected[family][i]!, 10));
  const [a = 0, b = 0, c = 0] = expected[family];
  // At the maximum the squared distances sum to n p whatever the family.
  expect(logLik).toBeCloseTo(-6 * Math.log(2 * Math.PI) - 3 * Math.log(a * c - b * b) - 6, 9);
  expect([...own]).toEqual(new Array(6).fill(1));
});

it('finds two groups, numbers them by size and says how sure each row is', () => {
  const { labels, sizes, model, own, responsibilities, converged } = fit({});
  expect(converged).toBe(true);
  expect(sizes[0]).toBeGreaterThan(sizes[1]!);
  expect(model.shares[0]).toBeCloseTo(2 / 3, 1);
  expect(model.means[2]).toBeCloseTo(8, 0);
  labels.forEach((label, row) => {
    const [a = NaN, b = NaN] = responsibilities.subarray(2 * row, 2 * row + 2);
    expect(a + b).toBeCloseTo(1, 12);
    expect(own[row]).toBe(Math.max(a, b));
    expect(label).toBe(a >= b ? 1 : 2);
  });
  expect(mixtureMembership(model, twoGroups(300, 2)).labels).toEqual(labels);
});

it.each(COVARIANCE_FAMILIES)('%s: the likelihood never falls from step to step', (family) => {
  let last = -Infinity;
  for (let maxSteps = 1; maxSteps < 12; maxSteps++) {
    // One start on two rows a group leaves the climb to the steps over all rows.
    const { logLik } = fit({
      columns: twoGroups(400, 3, 5),
      family,
      k: 3,
      starts: 1,
      maxSteps,
      tolerance: 0,
      sampleSize: 6,
    });
    expect(logLik).toBeGreaterThanOrEqual(last - 1e-9 * Math.abs(last));
    last = logLik;
  }
});

it.each(['full', 'tied'] as const)(
  '%s: turning the space changes nothing but the axes',
  (family) => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 6.28, noNaN: true }), (angle) => {
        const [x = new Float64Array(0), y = new Float64Array(0)] = twoGroups(150, 2);
        const [cos, sin] = [Math.cos(angle), Math.sin(angle)];
        const turned = [
          x.map((v, i) => cos * v - sin * y[i]!),
          x.map((v, i) => sin * v + cos * y[i]!),
        ];
        const [a, b] = [fit({ columns: [x, y], family }), fit({ columns: turned, family })];
        expect(Math.abs(a.logLik - b.logLik)).toBeLessThan(1e-3);
        expect(b.sizes).toEqual(a.sizes);
      }),
      { numRuns: 5, seed: 4 },
    );
  },
);

it('changing the unit moves ln L by n p ln of the factor and nothing else', () => {
  const columns = twoGroups(300, 2);
  const scaled = columns.map((x) => x.map((value) => 1000 * value - 77));
  const [a, b] = [fit({ columns }), fit({ columns: scaled })];
  expect(b.logLik).toBeCloseTo(a.logLik - 600 * Math.log(1000), 4);
  expect(b.labels).toEqual(a.labels);
});

it('weights count like repeated rows, relative to their mean', () => {
  const columns = twoGroups(120, 1);
  const repeats = columns[0]!.map((_, i) => 1 + (i % 3));
  const repeated = [
    Float64Array.from([...columns[0]!].flatMap((x, i) => new Array<number>(repeats[i]!).fill(x))),
  ];
  const [a, b] = [fit({ columns, weights: repeats }), fit({ columns: repeated })];
  [...a.model.means].forEach((mean, i) => expect(mean).toBeCloseTo(b.model.means[i]!, 4));
  expect(2 * a.logLik).toBeCloseTo(b.logLik, 4); // 240 repeats stand for 120 rows
  expect(a.weightOf).toEqual(b.sizes);
});

it('holds a flat group at the floor and says so', () => {
  const random = seededRandom(2);
  const x = Float64Array.from({ length: 200 }, () => random.normal());
  const { notes, logLik, model } = fit({ columns: [x, x.map((v) => 2 * v)], k: 1 });
  expect(Number.isFinite(logLik)).toBe(true);
  expect(model.covariances.every(Number.isFinite)).toBe(true);
  expect(notes.join()).toContain('1 of 1 groups are flat');
});

it('leaves rows with a missing coordinate out and says so', () => {
  const columns = twoGroups(300, 2);
  columns[1]![7] = NaN;
  const { labels, own, responsibilities, nUsed, nDropped, notes } = fit({ columns });
  expect([labels[7], own[7], responsibilities[14], nUsed, nDropped]).toEqual([0, NaN, NaN, 299, 1]);
  expect(notes.join()).toContain('1 rows with a missing coordinate');
});

it('keeps the last state and says so when the steps run out', () => {
  const { converged, steps, notes } = fit({ maxSteps: 1, tolerance: 0 });
  expect([converged, steps]).toEqual([false, 1]);
  expect(notes.join()).toContain('stopped after 1 steps');
});

it('gives the same result again, reports progress upwards and lets the listener cancel', () => {
  const seen: number[] = [];
  const first = fit({ onProgress: (share) => void seen.push(share) });
  expect(fit({})).toEqual(first);
  expect(seen).toEqual([...seen].sort((a, b) => a - b));
  expect(seen.at(-1)).toBe(1);
  const stop = () => {
    throw new Error('cancelled');
  };
  expect(() => fit({ onProgress: stop })).toThrow('cancelled');
});

it.each<[string, Partial<GaussianMixtureInput>]>([
  ['bad-parameter', { k: 0 }],
  ['bad-parameter', { k: 251 }],
  ['bad-parameter', { starts: 1.5 }],
  ['bad-parameter', { maxSteps: NaN }],
  ['bad-parameter', { tolerance: -1 }],
  ['too-few-rows', { columns: twoGroups(54, 2) }], // 11 parameters need 55
  ['too-few-rows', { columns: twoGroups(8, 2), family: 'diagonal' }],
  ['too-few-rows', { columns: [Float64Array.from({ length: 90 }, () => 1)] }],
  ['singular', { columns: [new Float64Array(90).fill(3)], k: 1 }],
  ['too-few-parts', { columns: [] }],
  ['shape', { columns: [new Float64Array(90), new Float64Array(89)] }],
  ['shape', { weights: new Float64Array(5) }],
  ['not-finite', { columns: [Float64Array.of(1, Infinity)] }],
  ['not-positive', { weights: new Float64Array(300) }],
])('refuses %s', (code, change) => {
  expect(() => fit(change)).toThrow(expect.objectContaining({ code }));
});

it('odd inputs: a refusal with a reason, or finite answers', () => {
  const value = fc.oneof(
    fc.double(),
    fc.constantFrom(0, -0, 1, 5e-324, 1e150, -1e150, NaN, Infinity),
    fc.integer({ min: -3, max: 3 }),
  );
  const table = fc.array(
    fc.array(value, { minLength: 9, maxLength: 9 }).map((column) => Float64Array.from(column)),
    { minLength: 1, maxLength: 2 },
  );
  fc.assert(
    fc.property(
      table,
      fc.integer({ min: 1, max: 2 }),
      fc.constantFrom(...COVARIANCE_FAMILIES),
      (columns, k, family) => {
        try {
          const { bic, icl, model, labels, nUsed } = fit({
            columns,
            k,
            family,
            rowsPerParameter: 1,
            maxSteps: 20,
          });
          expect([bic, icl, ...model.means].every(Number.isFinite)).toBe(true);
          expect(labels.filter((label) => label > 0)).toHaveLength(nUsed);
        } catch (error) {
          expect(error).toBeInstanceOf(KernelError);
        }
      },
    ),
    { numRuns: 150, seed: 20260101 },
  );
});
