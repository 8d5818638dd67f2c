import { expect, it } from 'vitest';
import { seededRandom } from '#kernels/random.ts';
import { categoryFrom } from '#kernels/tables/category.ts';
import { chiSquareTest } from '#kernels/tables/chi-square.ts';
import { crossTabulate } from '#kernels/tables/cross-tabulation.ts';
import { crossTableShiftTest } from '#kernels/tables/cross-table-shift.ts';
import { holeShiftTest } from '#kernels/tables/hole-shift.ts';

/** Share of the spread of y between classes, corrected for their number. */
function epsilonSquared(y: number[], labels: string[], source: Int32Array): number {
  const classes = new Map<string, number[]>();
  y.forEach((value, i) => {
    const label = labels[source[i]!]!;
    classes.set(label, [...(classes.get(label) ?? []), value]);
  });
  const mean = (list: number[]) => list.reduce((sum, value) => sum + value, 0) / list.length;
  const squares = (list: number[]) =>
    list.reduce((sum, value) => sum + (value - mean(list)) ** 2, 0);
  const within = [...classes.values()].reduce((sum, list) => sum + squares(list), 0);
  return 1 - ((y.length - 1) / (y.length - classes.size)) * (within / squares(y));
}

it('lists all 48 shifts of the two-hole case: 2 and 45 reach the two splitters (computed in Python)', () => {
  const y = [0, 0.1, 0.2, 0.1, 2, 2.1, 1.9, 2.2, 0.1, 0, 0.2, 2, 2.1, 1.8];
  const splitters = ['aaaabbbbaaabbb', 'cdcdcdcdcdcdcd'].map((text) => [...text]);
  const each = (source: Int32Array) => splitters.map((labels) => epsilonSquared(y, labels, source));
  const first = each(Int32Array.from(y.keys()));
  expect(first[0]).toBeCloseTo(0.987595, 6);
  expect(first[1]).toBeCloseTo(-0.064009, 6);
  let observedGiven = false;
  const statistics = (source: Int32Array) => {
    const values = each(source);
    if (observedGiven) return new Float64Array(2).fill(Math.max(...values));
    observedGiven = true;
    return Float64Array.from(values);
  };
  const test = holeShiftTest(Int32Array.of(0, 8, 14), statistics, { seed: 1 });
  expect(test.enumerated).toBe(true);
  expect(test.shifts).toBe(48);
  expect([...test.reached]).toEqual([2, 45]);
  expect(test.p[0]).toBeCloseTo(0.0417, 4);
  expect(test.p[1]).toBeCloseTo(0.9375, 4);
});

it('keeps every label in its hole and every run whole', () => {
  const starts = Int32Array.of(0, 50, 50, 130);
  const seen: number[] = [];
  holeShiftTest(
    starts,
    (source) => {
      for (const [start, end] of [
        [0, 50],
        [50, 130],
      ] as const) {
        const hole = source.subarray(start, end);
        expect([...hole].sort((a, b) => a - b)).toEqual(
          Array.from({ length: end - start }, (_, i) => start + i),
        );
        const jumps = hole.filter((row, i) => i > 0 && row !== hole[i - 1]! + 1);
        expect(jumps.length).toBeLessThanOrEqual(1);
      }
      seen.push(source[0]!);
      return Float64Array.of(0);
    },
    { seed: 4, draws: 20 },
  );
  expect(new Set(seen).size).toBeGreaterThan(5);
});

/** Two label columns of four holes in runs of about ten rows, drawn independently or the same. */
function columns(seed: number, tied: boolean) {
  const random = seededRandom(seed);
  const column = () => {
    let label = 'a';
    return Array.from({ length: 200 }, () => {
      if (random.uniform() < 0.1) label = random.uniform() < 0.5 ? 'a' : 'b';
      return label;
    });
  };
  const first = column();
  return { rows: categoryFrom(first), cols: categoryFrom(tied ? first : column()) };
}
const starts = Int32Array.of(0, 50, 100, 150, 200);

it('finds labels that go together and reports progress', () => {
  const { rows, cols } = columns(3, true);
  const shares: number[] = [];
  const test = crossTableShiftTest(rows, cols, starts, {
    seed: 7,
    onProgress: (share) => shares.push(share),
  });
  expect(test).toMatchObject({ shifts: 999, enumerated: false, nUsed: 200, floor: 1 / 1000 });
  expect(test?.p).toBeLessThanOrEqual(0.005);
  expect(test?.chiSquare).toBeCloseTo(200, 8);
  expect(shares).toHaveLength(999);
  expect(shares.at(-1)).toBe(1);
});

it('is fair for independent autocorrelated labels where the nominal p is not', () => {
  let nominal = 0;
  let shifted = 0;
  for (let seed = 0; seed < 100; seed++) {
    const { rows, cols } = columns(seed, false);
    const counts = crossTabulate(rows, cols, new Float64Array(200).fill(1)).counts;
    if ((chiSquareTest(counts, 2)?.nominalP ?? 1) < 0.05) nominal++;
    if ((crossTableShiftTest(rows, cols, starts, { seed, draws: 199 })?.p ?? 1) <= 0.05) shifted++;
  }
  expect(nominal).toBeGreaterThan(25);
  expect(shifted).toBeLessThan(12);
});

it('leaves unlogged rows out and gives the same answer for the same seed', () => {
  const { rows, cols } = columns(5, false);
  rows.codes[10] = -1;
  cols.codes[11] = -1;
  const run = () => crossTableShiftTest(rows, cols, starts, { seed: 2, draws: 99 });
  expect(run()?.nUsed).toBe(198);
  expect(run()).toEqual(run());
});

it('has nothing to test with one level, and refuses bad layouts', () => {
  const one = categoryFrom(Array.from({ length: 200 }, () => 'a'));
  const none = categoryFrom(Array.from({ length: 200 }, () => null));
  expect(crossTableShiftTest(one, columns(1, false).cols, starts, { seed: 1 })).toBeNull();
  expect(crossTableShiftTest(none, one, starts, { seed: 1 })).toBeNull();
  const zero = () => Float64Array.of(0);
  expect(() => holeShiftTest(Int32Array.of(1, 5), zero, { seed: 1 })).toThrow('hole starts from 0');
  expect(() => holeShiftTest(Int32Array.of(0, 5, 3), zero, { seed: 1 })).toThrow('step back at 2');
  expect(() => holeShiftTest(Int32Array.of(0, 5), zero, { seed: 1, draws: 0 })).toThrow(
    'draws >= 1',
  );
  expect(() => holeShiftTest(Int32Array.of(0, 5), () => Float64Array.of(NaN), { seed: 1 })).toThrow(
    'statistic 0 is NaN',
  );
});
