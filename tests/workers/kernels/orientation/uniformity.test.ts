import { describe, expect, it } from 'vitest';
import { axialUniformity, directionalUniformity, fabric } from '#kernels/orientation/fabric.ts';
import { orientationTensor } from '#kernels/orientation/orientation-tensor.ts';
import { strengthTest, uniformAxes } from '#kernels/orientation/strength-test.ts';
import { seededRandom } from '#kernels/random.ts';
import { lines, rotated } from './directions.ts';

describe('tests of uniformity', () => {
  it('Bingham: S .7 .2 .1 of 20 axes gives 31.0, p 9.4e-6 (computed in scipy)', () => {
    const { statistic, df, p } = axialUniformity([0.7, 0.2, 0.1], 20);
    expect(statistic).toBeCloseTo(31, 9);
    expect(df).toBe(5);
    // scipy 1.17.1: stats.chi2.sf(31, 5)
    expect(p / 9.367248705398544e-6).toBeCloseTo(1, 9);
  });

  it('Rayleigh: 7.814728 is the 95 % point, reached by R 7.2179 of 20 (chi-square tables)', () => {
    const { statistic, df, p } = directionalUniformity(7.2179, 20);
    expect(statistic).toBeCloseTo(7.814728, 3);
    expect(df).toBe(3);
    expect(p).toBeCloseTo(0.05, 4);
    expect(directionalUniformity(0, 20).p).toBe(1);
  });

  it('Woodcock: S .7 .2 .1 has K 1.807355, C 1.945910; shares .5 .2 .3 (computed)', () => {
    const { k, c, point, girdle, random } = fabric([0.7, 0.2, 0.1]);
    expect(k).toBeCloseTo(1.807355, 6);
    expect(c).toBeCloseTo(1.94591, 6);
    expect(point + girdle + random).toBeCloseTo(1, 12);
    [point, girdle, random].forEach((share, i) =>
      expect(share).toBeCloseTo([0.5, 0.2, 0.3][i]!, 12),
    );
  });
});

describe('strength against simulated uniform fabrics', () => {
  // 20 000 uniform fabrics simulated in numpy, band .01 of S and .03 of C, here from 8000:
  // S1 at 95 and 99 %, S3 at 5 and 1 %, C at 95 and 99 %.
  it.each([
    [10, [0.624, 0.682], [0.087, 0.056], [1.908, 2.396]],
    [20, [0.537, 0.576], [0.151, 0.122], [1.218, 1.471]],
    [50, [0.461, 0.487], [0.214, 0.194], [0.737, 0.869]],
    [100, [0.422, 0.44], [0.249, 0.233], [0.506, 0.597]],
  ])('%i uniform axes: eigenvalues and strength', (n, s1, s3, c) => {
    const draws = 8000;
    const random = seededRandom(17);
    const fabrics = Array.from(
      { length: draws },
      () => orientationTensor(uniformAxes(n, random)).eigenvalues,
    );
    const passed = (values: number[], share: number) =>
      values.toSorted((a, b) => a - b)[Math.round(share * draws)]!;
    const largest = fabrics.map(([first]) => first);
    const least = fabrics.map(([, , third]) => third);
    const strengths = fabrics.map((eigenvalues) => fabric(eigenvalues).c ?? Infinity);
    [0.95, 0.99].forEach((share, i) => {
      expect(Math.abs(passed(largest, share) - s1[i]!)).toBeLessThan(0.012);
      expect(Math.abs(passed(least, 1 - share) - s3[i]!)).toBeLessThan(0.012);
      // The far tail of the strength of ten axes is the widest: .06 is 2.5 %.
      expect(Math.abs(passed(strengths, share) - c[i]!)).toBeLessThan(n === 10 ? 0.06 : 0.03);
    });
  });

  it.each([
    [10, 1.908, 2.396],
    [20, 1.218, 1.471],
    [50, 0.737, 0.869],
    [100, 0.506, 0.597],
  ])('%i axes: critical C about %d and %d', (n, c95, c99) => {
    const { critical } = strengthTest(uniformAxes(n, seededRandom(2)), { seed: 11 });
    expect(Math.abs(critical.c95 - c95)).toBeLessThan(0.1 * c95);
    expect(Math.abs(critical.c99 - c99)).toBeLessThan(0.15 * c99);
  });

  it('finds a cluster strong and uniform axes not', () => {
    const cluster = lines(
      ...Array.from({ length: 15 }, (_, i): [number, number] => [
        (i * 7) % 30,
        40 + ((i * 5) % 20),
      ]),
    );
    expect(strengthTest(cluster, { seed: 1, draws: 99 }).p).toBe(0.01);
    expect(
      strengthTest(uniformAxes(15, seededRandom(8)), { seed: 1, draws: 199 }).p,
    ).toBeGreaterThan(0.05);
  });

  it('gives the same answer for the same seed, and for turned axes', () => {
    const axes = uniformAxes(12, seededRandom(5));
    const p = (vectors: Float64Array) => strengthTest(vectors, { seed: 3, draws: 99 }).p;
    expect(p(axes)).toBe(p(axes.slice()));
    expect(p(rotated(axes, 20, 80))).toBe(p(axes));
  });

  it('is stronger than any simulation where S3 is 0, and says how far it is', () => {
    const flat = lines(...Array.from({ length: 10 }, (_, i): [number, number] => [18 * i, 0]));
    const shares: number[] = [];
    const test = strengthTest(flat, { seed: 1, draws: 99, onProgress: (s) => shares.push(s) });
    expect(test).toMatchObject({ c: null, p: 0.01 });
    expect(shares.at(-1)).toBe(1);
  });

  it('refuses few axes and few draws', () => {
    expect(() => strengthTest(lines([1, 2]), { seed: 1 })).toThrow('at least 10 axes, found 1');
    const axes = uniformAxes(10, seededRandom(1));
    expect(() => strengthTest(axes, { seed: 1, draws: 10 })).toThrow('99 or more draws, found 10');
  });
});
