import type { DenseMath, RowTable } from './dense-math.ts';

type Loop = (...args: number[]) => number;
const isLoop = (value: unknown): value is Loop => typeof value === 'function';

/** `DenseMath` of an instance of the module made from `workers/simd`, on arrays in its memory. */
export function simdMath({ exports }: WebAssembly.Instance, memory: WebAssembly.Memory): DenseMath {
  const loop = (name: string): Loop => {
    const value: unknown = exports[name];
    if (!isLoop(value)) throw new TypeError(`the SIMD module has no ${name}`);
    return value;
  };
  /** Address of an array; one outside the memory would be read as something else. */
  const at = (array: Float64Array | Uint32Array | Uint8Array): number => {
    if (array.buffer !== memory.buffer) throw new TypeError('an array is not in the memory of its lab');
    return array.byteOffset;
  };
  const weightsAt = ({ weights }: RowTable): number => (weights ? at(weights) : 0);
  const [lnLess, addCrossProducts, addColumnSums] = [loop('lnLess'), loop('addCrossProducts'), loop('addColumnSums')];
  const [project, centreRows, sort] = [loop('project'), loop('centreRows'), loop('sort')];
  const [nearestTwo, assign, sumGroups, exchange] = [loop('nearestTwo'), loop('assign'), loop('sumGroups'), loop('exchange')];
  const [addDistances, mixtureShares, addGroupMoments] = [loop('addDistances'), loop('mixtureShares'), loop('addGroupMoments')];
  return {
    lnLess: (x, stride, count, nCols, shift) => lnLess(at(x), stride, count, nCols, at(shift)),
    addCrossProducts: (x, stride, count, nCols, cross) =>
      void addCrossProducts(at(x), stride, count, nCols, at(cross)),
    addColumnSums: (x, stride, count, nCols, sums) =>
      void addColumnSums(at(x), stride, count, nCols, at(sums)),
    project: (x, stride, count, nCols, weights, nOut, out) =>
      void project(at(x), stride, count, nCols, at(weights), nOut, at(out)),
    centreRows: (x, nRows, nCols) => void centreRows(at(x), nRows, nCols),
    sort: (x, n, spare, counts) => void sort(at(x), n, at(spare), at(counts)),
    nearestTwo: ({ points, n, stride }, centres, k, labels, nearestSq, nextSq) =>
      void nearestTwo(at(points), n, stride, at(centres), k, at(labels), at(nearestSq), at(nextSq)),
    assign: (rows, { k, centres, labels, lead, sums, mass, counts }, slack) =>
      assign(
        at(rows.points), rows.n, rows.stride, at(centres), k, weightsAt(rows),
        at(labels), at(lead), at(slack), at(sums), at(mass), at(counts),
      ),
    sumGroups: (rows, { centres, labels, sums, mass }) =>
      sumGroups(at(rows.points), rows.n, rows.stride, at(centres), weightsAt(rows), at(labels), at(sums), at(mass)),
    exchange: (rows, { k, centres, labels, lead, mass, counts }, reach, least, maxPasses) =>
      exchange(
        at(rows.points), rows.n, rows.stride, at(centres), k, weightsAt(rows),
        at(labels), at(mass), at(counts), at(lead), reach, least, maxPasses,
      ),
    addDistances: (x, stride, p, starts, k, from, to, sums) =>
      void addDistances(at(x), stride, p, at(starts), k, from, to, at(sums)),
    mixtureShares: ({ x, stride, p, deviations, shares, logDensity }, count, { k, isAxial, means, whiteners, logScales }) =>
      void mixtureShares(
        at(x), stride, count, p, k, Number(isAxial), at(means), at(whiteners), at(logScales),
        at(deviations), at(shares), at(logDensity),
      ),
    addGroupMoments: ({ x, stride, p, shares, rows, roots, deviations }, count, c, { means }, { first, squares, cross, nCols }) =>
      addGroupMoments(
        at(x), stride, count, p, nCols, at(means) + 8 * c * p, at(shares) + 8 * c * stride, at(rows), at(roots),
        at(deviations), at(first) + 8 * c * p, at(squares) + 8 * c * p, cross ? at(cross) + 8 * c * nCols * nCols : 0,
      ),
  };
}
