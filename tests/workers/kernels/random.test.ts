import { describe, expect, it } from 'vitest';
import { randomFromState, seededRandom } from '#kernels/random.ts';

const take = (count: number, draw: () => number) => Array.from({ length: count }, draw);

describe('xoshiro128**', () => {
  it('gives the known outputs from state 1, 2, 3, 4 (computed twice: Python and Node)', () => {
    const random = randomFromState([1, 2, 3, 4]);
    expect(take(5, random.bits)).toEqual([11520, 0, 5927040, 70819200, 2031721883]);
  });

  it('starts from four splitmix32 outputs of the seed (computed: Node)', () => {
    const random = randomFromState([1580013426, 350525680, 3524174333, 3011703609]);
    expect(take(20, seededRandom(1).bits)).toEqual(take(20, random.bits));
    const uniforms = take(2, seededRandom(1).uniform);
    expect(uniforms[0]).toBeCloseTo(0.0915695318, 10);
    expect(uniforms[1]).toBeCloseTo(0.8881928137, 10);
  });

  it('repeats its stream for a seed and differs between seeds', () => {
    expect(take(50, seededRandom(42).uniform)).toEqual(take(50, seededRandom(42).uniform));
    expect(take(50, seededRandom(42).uniform)).not.toEqual(take(50, seededRandom(43).uniform));
  });

  it('keeps uniforms in [0, 1), spread evenly over ten bins', () => {
    const bins = new Array<number>(10).fill(0);
    for (const u of take(100_000, seededRandom(7).uniform)) bins[Math.floor(u * 10)]! += 1;
    // 10 000 expected a bin, sd about 95
    for (const count of bins) expect(Math.abs(count - 10_000)).toBeLessThan(480);
  });

  it('draws integers below a limit, all of them', () => {
    const random = seededRandom(3);
    const seen = new Set(take(500, () => random.below(6)));
    expect([...seen].sort()).toEqual([0, 1, 2, 3, 4, 5]);
  });

  it('draws finite normals of mean 0 and standard deviation 1', () => {
    const normals = take(100_000, seededRandom(11).normal);
    const mean = normals.reduce((a, b) => a + b, 0) / normals.length;
    const variance = normals.reduce((sum, x) => sum + (x - mean) ** 2, 0) / normals.length;
    expect(Math.abs(mean)).toBeLessThan(0.015);
    expect(Math.abs(variance - 1)).toBeLessThan(0.025);
  });
});
