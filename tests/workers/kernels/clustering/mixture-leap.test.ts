import { describe, expect, it } from 'vitest';
import { isModel, leapOf, parametersOf, setParameters } from '#kernels/clustering/mixture-leap.ts';
import { emptyMixture } from '#kernels/clustering/mixture-model.ts';

describe('leapOf', () => {
  it('lands on the limit of steps that shrink by one factor', () => {
    // 2 - 2^-i: 1, 1.5, 1.75, … tends to 2; with r = .5 and v = -.25, s = 2.
    const leap = leapOf([Float64Array.of(1, 4), Float64Array.of(1.5, 4), Float64Array.of(1.75, 4)], 100);
    expect(leap?.length).toBe(2);
    expect(Array.from(leap?.parameters ?? [])).toEqual([2, 4]);
  });

  it('goes no farther than it may', () => {
    const trail = [0, 1, 1.99].map((value) => Float64Array.of(value)) as [Float64Array, Float64Array, Float64Array];
    expect(leapOf(trail, 4)?.length).toBe(4);
    expect(leapOf(trail, 1000)?.length).toBeCloseTo(100, 8);
  });

  it('offers nothing when steps turn back, grow or stand still', () => {
    const trail = (...values: [number, number, number]) =>
      values.map((value) => Float64Array.of(value)) as [Float64Array, Float64Array, Float64Array];
    expect(leapOf(trail(0, 1, 0.5), 100)).toBeNull();
    expect(leapOf(trail(0, 1, 4), 100)).toBeNull();
    expect(leapOf(trail(1, 1, 1), 100)).toBeNull();
  });
});

describe('parameters of a mixture', () => {
  const model = emptyMixture('full', 2, 2);
  model.shares.set([0.25, 0.75]);
  model.means.set([1, 2, 3, 4]);
  model.covariances.set([1, 0.5, 1, 2, 0, 2]);

  it('come back as they were', () => {
    const copy = emptyMixture('full', 2, 2);
    setParameters(copy, parametersOf(model));
    expect(copy).toEqual(model);
  });

  it('make no model once a share is gone or a group is flatter than the floor', () => {
    const work = new Float64Array(3);
    const before = parametersOf(model);
    expect(isModel(model, before, 0.1, work)).toBe(true);
    expect(isModel(model, before, 0.6, work)).toBe(false); // the least eigenvalue is .5
    model.shares[0] = -0.1;
    expect(isModel(model, before, 0.1, work)).toBe(false);
  });
});
