import { describe, expect, it } from 'vitest';
import { blankLimit, markFailedBatches, readBlanks } from '#kernels/quality/blanks.ts';
import { drift } from '#kernels/quality/drift.ts';
import { seededRandom } from '#kernels/random.ts';

describe('blanks', () => {
  it('limit is the larger of five detection limits and 1 % of the ore (common practice, from memory)', () => {
    expect(blankLimit(2, 500)).toBe(10);
    expect(blankLimit(2, 5000)).toBe(50);
    expect(blankLimit(2, 500, { limits: 10, oreShare: 0.1 })).toBe(50);
  });

  it('fails blanks above the limit only, and passes over missing ones', () => {
    const found = readBlanks(Float64Array.of(1, 10, 10.1, NaN), new Float64Array(4).fill(NaN), 10);
    expect([...found.isFailed]).toEqual([0, 0, 1, 0]);
    expect(found).toMatchObject({
      nUsed: 3,
      nMissing: 1,
      nFailed: 1,
      carryOver: null,
      hasCarryOver: false,
    });
  });

  it('sees grade carried over from the sample before', () => {
    const before = Float64Array.from({ length: 12 }, (_, i) => 100 * (i + 1));
    const carried = readBlanks(
      before.map((value) => value / 1000),
      before,
      10,
    );
    expect(carried).toMatchObject({ carryOver: 1, hasCarryOver: true, nFailed: 0 });
    const clean = readBlanks(
      before.map((_, i) => (i * 7) % 5),
      before,
      10,
    );
    expect(clean.hasCarryOver).toBe(false);
    expect(
      readBlanks(
        before.map(() => 1),
        before,
        10,
      ).carryOver,
    ).toBeNull();
    expect(readBlanks(before.subarray(0, 9), before.subarray(0, 9), 1e4).carryOver).toBeNull();
  });

  it('marks the samples of batches with a failed control', () => {
    const marks = markFailedBatches(['b1', 'b2', 'b2', 'b3'], Uint8Array.of(0, 1, 0, 0), [
      'b1',
      'b2',
      'b9',
      'b2',
    ]);
    expect([...marks]).toEqual([0, 1, 0, 1]);
  });

  it.each([
    ['bad-parameter', () => blankLimit(0, 0)],
    ['bad-parameter', () => blankLimit(-1, 500)],
    ['bad-parameter', () => blankLimit(NaN, 500)],
    ['bad-parameter', () => readBlanks(new Float64Array(1), new Float64Array(1), 0)],
    ['shape', () => readBlanks(new Float64Array(1), new Float64Array(2), 1)],
    ['too-few-rows', () => readBlanks(Float64Array.of(NaN), Float64Array.of(1), 1)],
    ['not-finite', () => readBlanks(Float64Array.of(Infinity), Float64Array.of(1), 1)],
    ['not-finite', () => readBlanks(Float64Array.of(1), Float64Array.of(-Infinity), 1)],
    ['shape', () => markFailedBatches(['a'], new Uint8Array(2), [])],
  ] as const)('refuses with %s', (code, call) => {
    expect(call).toThrow(expect.objectContaining({ code }));
  });
});

describe('drift', () => {
  const noise = (n: number, size: number, seed = 3) => {
    const random = seededRandom(seed);
    return Float64Array.from({ length: n }, () => size * random.normal());
  };

  it('gives a straight drift back with its running sum', () => {
    const found = drift(
      Float64Array.from({ length: 10 }, (_, i) => 0.1 * i),
      { seed: 1 },
    );
    expect(found.slope).toBeCloseTo(0.1, 12);
    expect(found.change).toBeCloseTo(0.9, 12);
    expect(found.cusum[9]).toBeCloseTo(4.5, 12);
  });

  it('finds where the level changes, missing results left out', () => {
    const z = noise(60, 0.5).map((value, i) => value + (i >= 35 ? 2 : 0));
    z[3] = NaN;
    const found = drift(z, { seed: 1 });
    expect(found).toMatchObject({ n: 59, changeAfter: 34 });
    expect(found.changeP).toBe(1 / 1000);
  });

  it('divides twelve results at 4 and 8 (computed: exact dynamic programme)', () => {
    const z = Float64Array.of(0.1, -0.2, 0.05, 0, 3.1, 2.9, 3.05, 3, -1, -1.1, -0.95, -1.05);
    const { levels } = drift(z, { seed: 1, draws: 19 });
    expect(levels.map(({ from, to, n }) => [from, to, n])).toEqual([
      [0, 3, 4],
      [4, 7, 4],
      [8, 11, 4],
    ]);
    expect(levels[1]?.mean).toBeCloseTo(3.0125, 12);
  });

  it('gives levels by their place in the input when results are missing', () => {
    const z = Float64Array.of(NaN, 0.1, -0.2, 0.05, 0, NaN, 3.1, 2.9, 3.05, 3, NaN);
    const { levels } = drift(z, { seed: 1, draws: 19 });
    expect(levels.map(({ from, to }) => [from, to])).toEqual([
      [1, 4],
      [6, 9],
    ]);
  });

  it('sees no change in results in control, in about 19 of 20', () => {
    const seen = Array.from({ length: 20 }, (_, seed) =>
      drift(noise(40, 1, 100 + seed), { seed: 1, draws: 199 }),
    ).filter(({ changeAfter }) => changeAfter !== null);
    expect(seen.length).toBeLessThanOrEqual(3);
  });

  it('is flat for one value, and the same for the same seed', () => {
    const flat = drift(new Float64Array(9).fill(1), { seed: 1, draws: 99 });
    expect(flat).toMatchObject({ slope: 0, change: 0, changeAfter: null, changeP: 1 });
    expect(flat.levels).toEqual([{ from: 0, to: 8, n: 9, mean: 1 }]);
    const z = noise(30, 1);
    expect(drift(z, { seed: 5, draws: 99 })).toEqual(drift(z, { seed: 5, draws: 99 }));
  });

  it('thins a long series for the slope, and says so', () => {
    const z = noise(4001, 0.1).map((value, i) => value + i / 1000);
    const found = drift(z, { seed: 1, draws: 19 });
    expect(found.slope).toBeCloseTo(0.001, 4);
    expect(found.notes).toEqual([expect.stringContaining('one in 3 of 4001')]);
  });

  it.each([
    ['too-few-rows', () => drift(new Float64Array(7), { seed: 1 })],
    ['too-few-rows', () => drift(new Float64Array(9).fill(NaN), { seed: 1 })],
    ['not-finite', () => drift(new Float64Array(9).fill(Infinity), { seed: 1 })],
    ['bad-parameter', () => drift(new Float64Array(9), { seed: 1, draws: 3 })],
  ] as const)('refuses with %s', (code, call) => {
    expect(call).toThrow(expect.objectContaining({ code }));
  });
});
