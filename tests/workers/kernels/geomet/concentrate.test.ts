import { expect, it } from 'vitest';
import { concentrateGrade, ratioToMetal } from '#kernels/geomet/concentrate.ts';

const input = {
  headPpm: 200,
  metalHeadPpm: 10_000,
  metalConcentratePpm: 250_000,
  recovery: 0.9,
  metalRecovery: 0.9,
  leastMetalHeadPpm: 500,
};

it('carries 200 ppm As at 1 % Cu into a 25 % Cu concentrate as 0.5 % (mass balance by hand)', () => {
  const grade = concentrateGrade(input);
  expect(grade?.gradePpm).toBeCloseTo(5000, 9);
  expect(grade?.massPull).toBeCloseTo(0.036, 12);
});

it('depends on the ratio of recoveries and of grades alone', () => {
  const half = concentrateGrade({ ...input, recovery: 0.45 });
  expect(half?.gradePpm).toBeCloseTo(2500, 9);
  const lean = concentrateGrade({ ...input, headPpm: 100, metalHeadPpm: 5000 });
  expect(lean?.gradePpm).toBeCloseTo(5000, 9);
});

it('has no answer for a head with too little metal', () => {
  expect(concentrateGrade({ ...input, metalHeadPpm: 499 })).toBeNull();
  expect(concentrateGrade({ ...input, metalHeadPpm: 0, leastMetalHeadPpm: 0 })).toBeNull();
  const ratios = ratioToMetal(
    Float64Array.of(10, 10, 10, NaN),
    Float64Array.of(1000, 400, NaN, 900),
    500,
  );
  expect([...ratios]).toEqual([0.01, NaN, NaN, NaN]);
});

it('refuses impossible numbers', () => {
  expect(() => concentrateGrade({ ...input, recovery: 1.2 })).toThrow('recoveries 1.2, 0.9');
  expect(() => concentrateGrade({ ...input, headPpm: NaN })).toThrow('expected grades >= 0');
  expect(() => ratioToMetal(new Float64Array(1), new Float64Array(2), 0)).toThrow('found 1 and 2');
  expect(() => ratioToMetal(new Float64Array(1), new Float64Array(1), -1)).toThrow('found -1');
});
