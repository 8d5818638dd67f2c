import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  NO_LABEL, SORT_COUNTS, type DenseMath, type MixtureRoom, type RowGroups, type RowTable,
} from '#kernels/dense/dense-math.ts';
import { newSimdLab, plainLab, withLab, type Lab } from '#kernels/dense/lab.ts';
import { lnByTable } from '#kernels/dense/plain-logarithm.ts';
import { seededRandom } from '#kernels/random.ts';

type Result = number | ArrayLike<number>;

/** Runs the same work in both labs: what it gives must be the same to the bit. */
function bothWays(work: (lab: Lab, math: DenseMath) => Result[]): Result[] {
  const simd = newSimdLab();
  if (!simd) throw new Error('expected a machine with SIMD: without it nothing is compared here');
  const [fast, plain] = [simd, plainLab()].map((lab) => {
    lab.clear(2 ** 22);
    return work(lab, lab.math).map((result) => (typeof result === 'number' ? result : Array.from(result)));
  });
  expect(fast).toEqual(plain);
  return plain!;
}

const normals = (n: number, seed: number): Float64Array => {
  const random = seededRandom(seed);
  return Float64Array.from({ length: n }, () => 3 * random.normal());
};

/** An array of the lab with these values. */
function filled(lab: Lab, values: ArrayLike<number>): Float64Array {
  const array = lab.f64(values.length);
  array.set(values);
  return array;
}

const some = (from: number, to: number) => fc.integer({ min: from, max: to });
const seeds = some(1, 1e6);
const STRIDE = 72;

describe('the SIMD loops and their plain twins give the same bits', () => {
  it('lnLess, addColumnSums and addCrossProducts of a block', () => {
    fc.assert(
      fc.property(some(1, 70), some(1, 4), seeds, (count, quarters, seed) => {
        bothWays((lab, math) => {
          const nCols = 4 * quarters;
          const x = filled(lab, normals(STRIDE * nCols, seed).map((value) => Math.exp(4 * value)));
          const shift = filled(lab, normals(nCols, seed + 1));
          const [sums, cross] = [lab.f64(nCols), lab.f64(nCols * nCols)];
          const bad = math.lnLess(x, STRIDE, count, nCols, shift);
          math.addColumnSums(x, STRIDE, count, nCols, sums);
          math.addCrossProducts(x, STRIDE, count, nCols, cross);
          const upper = Array.from(cross).filter((_, at) => at % nCols >= Math.floor(at / nCols));
          const logs = Array.from(x).filter((_, at) => at % STRIDE < count);
          return [bad, logs, sums, upper];
        });
      }),
    );
  });

  it.each([0, -0, -1, NaN, Infinity, -Infinity, -1e-310])('lnLess names the place of %s', (odd) => {
    for (const place of [0, 1, 4, 6]) {
      const [bad] = bothWays((lab, math) => {
        const x = lab.f64(16).fill(2);
        x[8 + place] = odd;
        return [math.lnLess(x, 8, 7, 2, lab.f64(2))];
      });
      expect(bad).toBe(8 + place);
    }
  });

  it('project, for any number of rows', () => {
    fc.assert(
      fc.property(some(1, 70), some(1, 9), seeds, (count, nCols, seed) => {
        bothWays((lab, math) => {
          const x = filled(lab, normals(STRIDE * nCols, seed));
          const weights = filled(lab, normals(8 * nCols, seed + 1));
          const out = lab.f64(STRIDE * 8);
          math.project(x, STRIDE, count, nCols, weights, 8, out);
          return [out];
        });
      }),
    );
  });

  it('centreRows', () => {
    fc.assert(
      fc.property(some(1, 30), some(1, 9), seeds, (nRows, nCols, seed) => {
        bothWays((lab, math) => {
          const x = filled(lab, normals(nRows * nCols, seed));
          math.centreRows(x, nRows, nCols);
          return [x];
        });
      }),
    );
  });

  it('sort, infinities, subnormals and both zeros included', () => {
    const value = fc.oneof(fc.double({ noNaN: true }), fc.constantFrom(0, -0, 5e-324, -5e-324, Infinity, -Infinity, 1));
    fc.assert(
      fc.property(fc.array(value, { minLength: 1, maxLength: 60 }), (given) => {
        const [sorted] = bothWays((lab, math) => {
          const x = filled(lab, given);
          math.sort(x, given.length, lab.f64(given.length), lab.u32(SORT_COUNTS));
          return [x];
        });
        expect(sorted).toEqual(Array.from(Float64Array.from(given).sort()));
      }),
    );
  });

  it('addDistances of rows sorted by group', () => {
    fc.assert(
      fc.property(fc.array(some(0, 23), { minLength: 1, maxLength: 4 }), some(1, 9), seeds, (sizes, p, seed) => {
        const n = sizes.reduce((sum, size) => sum + size, 0);
        bothWays((lab, math) => {
          const stride = n + 1;
          const x = filled(lab, normals(stride * p, seed));
          const starts = lab.u32(sizes.length + 1);
          sizes.forEach((size, g) => (starts[g + 1] = starts[g]! + size));
          const sums = lab.f64(sizes.length * stride);
          const middle = Math.floor(n / 2);
          math.addDistances(x, stride, p, starts, sizes.length, 0, middle, sums);
          math.addDistances(x, stride, p, starts, sizes.length, middle, n, sums);
          return [sums];
        });
      }),
    );
  });

  const table = (lab: Lab, n: number, stride: number, seed: number, weighted: boolean): RowTable => ({
    points: filled(lab, normals(n * stride, seed)),
    n,
    stride,
    weights: weighted ? filled(lab, normals(n, seed + 3).map((value) => 0.5 + Math.abs(value))) : null,
  });
  const startGroups = (lab: Lab, { n, stride, points }: RowTable, k: number): RowGroups => {
    const labels = lab.u8(n).fill(NO_LABEL);
    return {
      k, labels,
      centres: filled(lab, points.subarray(0, k * stride)),
      lead: lab.f64(n).fill(-Infinity),
      sums: lab.f64(k * stride), mass: lab.f64(k), counts: lab.u32(k),
    };
  };

  it.each([2, 4, 6, 8, 10])('nearestTwo, assign, sumGroups and exchange of rows of %i coordinates', (stride) => {
    fc.assert(
      fc.property(some(12, 80), some(1, 6), seeds, fc.boolean(), (n, k, seed, weighted) => {
        bothWays((lab, math) => {
          const rows = table(lab, n, stride, seed, weighted);
          const groups = startGroups(lab, rows, k);
          const [nearest, labels] = [[lab.f64(n), lab.f64(n)], lab.u8(n)];
          math.nearestTwo(rows, groups.centres, k, labels, nearest[0]!, nearest[1]!);
          const slack = lab.f64(k);
          const changed = math.assign(rows, groups, slack);
          for (let c = 0; c < k; c++) {
            slack[c] = 0.1;
            for (let j = 0; j < stride; j++) groups.centres[c * stride + j] = groups.sums[c * stride + j]! / groups.mass[c]!;
          }
          const again = math.assign(rows, groups, slack);
          groups.lead.fill(-Infinity);
          const gained = math.exchange(rows, groups, 0.1, 1, 5);
          groups.sums.fill(0);
          groups.mass.fill(0);
          const inertia = math.sumGroups(rows, groups);
          const { centres, lead, sums, mass, counts } = groups;
          return [
            labels, ...nearest, changed, again, gained, inertia, groups.labels, centres, Array.from(lead), sums, mass, counts,
          ];
        });
      }),
    );
  });

  it.each([true, false])('mixtureShares and addGroupMoments, axial %s', (isAxial) => {
    fc.assert(
      fc.property(some(1, 70), some(1, 9), some(1, 5), seeds, (count, p, k, seed) => {
        bothWays((lab, math) => {
          const nCols = 4 * Math.ceil(p / 4);
          const room: MixtureRoom = {
            stride: STRIDE, p,
            x: filled(lab, normals(STRIDE * p, seed)),
            shares: lab.f64(k * STRIDE), logDensity: lab.f64(STRIDE),
            deviations: lab.f64(nCols * STRIDE), rows: lab.u32(STRIDE), roots: lab.f64(STRIDE),
          };
          const density = {
            k, isAxial,
            means: filled(lab, normals(k * p, seed + 1)),
            whiteners: filled(lab, normals((k * p * (p + 1)) / 2, seed + 2)),
            logScales: filled(lab, normals(k, seed + 3)),
          };
          const moments = {
            first: lab.f64(k * p), squares: lab.f64(k * p), nCols,
            cross: isAxial ? null : lab.f64(k * nCols * nCols),
          };
          math.mixtureShares(room, count, density);
          const masses = Array.from({ length: k }, (_, c) => math.addGroupMoments(room, count, c, density, moments));
          const used = (values: Float64Array): number[] => Array.from(values).filter((_, at) => at % STRIDE < count);
          const cross = Array.from(moments.cross ?? []).filter((_, at) => at % nCols >= Math.floor((at % nCols ** 2) / nCols));
          return [used(room.shares), used(room.logDensity), masses, moments.first, moments.squares, cross];
        });
      }),
    );
  });
});

describe('lnByTable', () => {
  it('is within 1e-15 of the logarithm of the language, relative where it is large', () => {
    fc.assert(
      fc.property(fc.double({ min: 5e-324, max: 1.7976931348623157e308, noNaN: true }), (x) => {
        const exact = Math.log(x);
        expect(Math.abs(lnByTable(x) - exact)).toBeLessThanOrEqual(1e-15 * Math.max(1, Math.abs(exact)));
      }),
      { numRuns: 2000 },
    );
  });
});

describe('a lab', () => {
  it('refuses arrays that are not in its memory', () => {
    const lab = newSimdLab()!;
    lab.clear(1024);
    expect(() => lab.math.centreRows(new Float64Array(4), 2, 2)).toThrow('an array is not in the memory of its lab');
  });

  it('gives zeros again after it was used', () => {
    const lab = newSimdLab()!;
    lab.clear(160_000);
    lab.f64(20_000).fill(7);
    for (const length of [100, 20_000, 40_000]) {
      lab.clear(8 * length);
      expect(lab.f64(length).every((value) => value === 0)).toBe(true);
    }
  });

  it('is another one for work within work, and the same for work after work', () => {
    withLab(1000, (outer) => {
      const array = outer.f64(10).fill(1);
      withLab(1000, (inner) => inner.f64(10).fill(2));
      expect(array.every((value) => value === 1)).toBe(true);
    });
    const bufferOf = (lab: Lab) => lab.f64(10).buffer;
    expect(withLab(1000, bufferOf)).toBe(withLab(1000, bufferOf));
  });

  it('refuses more than one memory can hold', () => {
    expect(() => withLab(2 ** 33, () => 0)).toThrow(expect.objectContaining({ code: 'too-large' }));
  });
});
