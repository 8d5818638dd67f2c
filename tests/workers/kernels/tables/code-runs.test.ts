import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { categoryFrom } from '#kernels/tables/category.ts';
import { codeRuns, contactCounts } from '#kernels/tables/code-runs.ts';

/** Two holes of metre intervals: A B B A - B, then A. */
const domains = categoryFrom(['A', 'B', 'B', 'A', null, 'B', 'A']);
const intervals = {
  holeStarts: Int32Array.of(0, 6, 7),
  fromM: Float64Array.of(0, 1, 2, 3, 4, 5, 0),
  toM: Float64Array.of(1, 2, 3, 4, 5, 6, 1),
};

describe('runs and contacts', () => {
  it('are found neither across unlogged rows nor between holes', () => {
    const runs = codeRuns(intervals, domains);
    expect(runs.map(({ first, last, touchesAbove }) => [first, last, touchesAbove])).toEqual([
      [0, 0, false],
      [1, 2, true],
      [3, 3, true],
      [5, 5, false],
      [6, 6, false],
    ]);
    expect([...contactCounts(runs, 2)]).toEqual([0, 2, 2, 0]);
  });

  it('end at faults and gaps, not at rounding', () => {
    const contacts = (changed: Partial<typeof intervals> & { isBreakBefore?: Uint8Array }) =>
      contactCounts(codeRuns({ ...intervals, ...changed }, domains), 2)[1];
    const endingAt = (end: number) => intervals.toM.map((to, i) => (i === 2 ? end : to));
    expect(contacts({ isBreakBefore: Uint8Array.of(0, 1, 0, 0, 0, 0, 0) })).toBe(1);
    expect(contacts({ toM: endingAt(2.5) })).toBe(1);
    expect(contacts({ toM: endingAt(2.996) })).toBe(2);
  });

  it('cut one code at a fault without a contact', () => {
    const same = categoryFrom(['A', 'A', 'A', 'A', 'A', 'A', 'A']);
    const runs = codeRuns(
      { ...intervals, isBreakBefore: Uint8Array.of(0, 0, 1, 0, 0, 0, 0) },
      same,
    );
    expect(runs.map(({ first, last }) => [first, last])).toEqual([
      [0, 1],
      [2, 5],
      [6, 6],
    ]);
    expect([...contactCounts(runs, 1)]).toEqual([0]);
  });

  it('hold every logged row once, in order', () => {
    const label = fc.constantFrom('A', 'B', null);
    fc.assert(
      fc.property(fc.array(label, { minLength: 1, maxLength: 25 }), (labels) => {
        const n = labels.length;
        const column = Float64Array.from({ length: n }, (_, i) => i);
        const codes = categoryFrom(labels);
        const runs = codeRuns(
          { holeStarts: Int32Array.of(0, n), fromM: column, toM: column.map((x) => x + 1) },
          codes,
        );
        const rows = runs.flatMap(({ first, last }) =>
          Array.from({ length: last - first + 1 }, (_, i) => first + i),
        );
        expect(rows).toEqual([...labels.keys()].filter((i) => labels[i] !== null));
        for (const { first, last, code } of runs)
          expect(codes.codes.subarray(first, last + 1).every((own) => own === code)).toBe(true);
      }),
    );
  });

  it('refuse labels that do not fit', () => {
    expect(() => codeRuns(intervals, categoryFrom(['A']))).toThrow(
      expect.objectContaining({ code: 'shape' }),
    );
  });
});
