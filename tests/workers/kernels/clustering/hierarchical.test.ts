import fc from 'fast-check';
import { expect, it } from 'vitest';
import { adjustedRandIndex } from '#kernels/clustering/agreement.ts';
import { cutTree } from '#kernels/clustering/cut-tree.ts';
import {
  hierarchicalTree,
  type HierarchicalInput,
  type Linkage,
} from '#kernels/clustering/hierarchical.ts';
import { seededRandom } from '#kernels/random.ts';

const six = [Float64Array.of(0, 0, 1, 5, 5, 6), Float64Array.of(0, 1, 0, 5, 6, 5)];
const tree = (change: Partial<HierarchicalInput> = {}) =>
  hierarchicalTree({ columns: six, linkage: 'ward', ...change });

it('joins six points at the heights of the definition (computed in numpy)', () => {
  const { heights, merges } = tree();
  [1, 1, 1.290994, 1.290994, 12.247449].forEach((height, m) =>
    expect(heights[m]).toBeCloseTo(height, 6),
  );
  expect([...merges.slice(-2)].every((group) => group >= 6)).toBe(true);
  expect([...cutTree(tree(), 2)]).toEqual([1, 1, 1, 2, 2, 2]);
});

it('numbers groups by weight and leaves incomplete rows at 0', () => {
  const columns = six.map((column) => Float64Array.of(NaN, ...column));
  const found = tree({ columns });
  expect(found).toMatchObject({ n: 6, nDropped: 1, nRows: 7 });
  expect([...cutTree(found, 2, [1, 1, 1, 1, 1, 1, 5])]).toEqual([0, 2, 2, 2, 1, 1, 1]);
});

it('points with sizes join as if every point were there as often', () => {
  const sizes = [1, 3, 2, 1, 2, 1];
  const repeat = (x: Float64Array) =>
    Float64Array.from([...x].flatMap((value, i) => new Array<number>(sizes[i]!).fill(value)));
  for (const linkage of ['ward', 'average'] as const) {
    const whole = tree({ columns: six.map(repeat), linkage }).heights.slice(-5);
    tree({ linkage, sizes }).heights.forEach((height, m) =>
      expect(height).toBeCloseTo(whole[m]!, 10),
    );
  }
});

const table = fc.integer({ min: 2, max: 12 }).chain((n) =>
  fc.array(fc.array(fc.integer({ min: -9, max: 9 }), { minLength: n, maxLength: n }), {
    minLength: 1,
    maxLength: 3,
  }),
);

it.each(['ward', 'average', 'complete'] as const)(
  '%s: heights ascend, scale with the rows and make k groups',
  (linkage) => {
    fc.assert(
      fc.property(table, fc.integer({ min: 1, max: 12 }), (rows, wanted) => {
        const columns = rows.map((column) => Float64Array.from(column));
        const found = tree({ columns, linkage });
        const scaled = tree({ columns: columns.map((x) => x.map((v) => 4 * v)), linkage });
        expect([...found.heights]).toEqual([...found.heights].sort((a, b) => a - b));
        found.heights.forEach((height, m) => expect(scaled.heights[m]).toBeCloseTo(4 * height, 9));
        const k = Math.min(wanted, found.n);
        expect(new Set(cutTree(found, k)).size).toBe(k);
      }),
      { numRuns: 60, seed: 3 },
    );
  },
);

/** All pairs of groups at every step, from the definition. */
function slowHeights(rows: number[][], linkage: Linkage): number[] {
  let groups = rows.map((row) => [row]);
  const distance = (a: number[], b: number[]) => Math.hypot(...a.map((value, j) => value - b[j]!));
  const centre = (group: number[][]) =>
    group[0]!.map((_, j) => group.reduce((sum, row) => sum + row[j]!, 0) / group.length);
  const between = (a: number[][], b: number[][]) => {
    if (linkage === 'ward')
      return (
        Math.sqrt((2 * a.length * b.length) / (a.length + b.length)) *
        distance(centre(a), centre(b))
      );
    const all = a.flatMap((x) => b.map((y) => distance(x, y)));
    return linkage === 'complete'
      ? Math.max(...all)
      : all.reduce((sum, d) => sum + d, 0) / all.length;
  };
  const heights: number[] = [];
  while (groups.length > 1) {
    let best = { height: Infinity, i: 0, j: 1 };
    groups.forEach((a, i) =>
      groups.forEach((b, j) => {
        if (i < j && between(a, b) < best.height) best = { height: between(a, b), i, j };
      }),
    );
    const { i, j } = best;
    heights.push(best.height);
    groups = [...groups.filter((_, at) => at !== i && at !== j), [...groups[i]!, ...groups[j]!]];
  }
  return heights;
}

it.each(['ward', 'average', 'complete'] as const)(
  '%s: equals a search of all pairs at every step',
  (linkage) => {
    const random = seededRandom(6);
    const rows = Array.from({ length: 25 }, () => [
      random.normal(),
      random.normal(),
      random.normal(),
    ]);
    const columns = [0, 1, 2].map((j) => Float64Array.from(rows, (row) => row[j]!));
    const slow = slowHeights(rows, linkage);
    tree({ columns, linkage }).heights.forEach((height, m) =>
      expect(height).toBeCloseTo(slow[m]!, 10),
    );
  },
);

it('the order of the rows does not matter', () => {
  const random = seededRandom(9);
  const x = Float64Array.from({ length: 60 }, () => random.normal());
  const backwards = x.slice().reverse();
  const [a, b] = [x, backwards].map((column) => cutTree(tree({ columns: [column] }), 4));
  expect(adjustedRandIndex([...a!], [...b!].reverse())).toBe(1);
});

it('equal rows join at height 0, and a listener may cancel', () => {
  expect([...tree({ columns: [new Float64Array(4).fill(2)] }).heights]).toEqual([0, 0, 0]);
  const columns = [Float64Array.from({ length: 80 }, (_, i) => i * i)];
  const stop = () => {
    throw new Error('cancelled');
  };
  expect(() => tree({ columns, onProgress: stop })).toThrow('cancelled');
});

it.each([
  ['too-many-rows', () => tree({ maxRows: 5 })],
  ['too-few-rows', () => tree({ columns: [Float64Array.of(1, NaN)] })],
  ['shape', () => tree({ sizes: [1, 2] })],
  ['bad-parameter', () => tree({ sizes: [1, 1, 1, 0, 1, 1] })],
  ['not-finite', () => tree({ columns: [Float64Array.of(1, -Infinity)] })],
  ['bad-parameter', () => cutTree(tree(), 0)],
  ['bad-parameter', () => cutTree(tree(), 7)],
  ['bad-parameter', () => cutTree(tree(), NaN)],
  ['shape', () => cutTree(tree(), 2, [1])],
])('refuses %s', (code, call) => {
  expect(call).toThrow(expect.objectContaining({ code }));
});
