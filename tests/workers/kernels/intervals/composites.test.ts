import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { compositeBreaks, type CompositeRules } from '#kernels/intervals/composite-breaks.ts';
import { compositeGrade } from '#kernels/intervals/composite-grade.ts';
import { NO_DOMAIN, planComposites } from '#kernels/intervals/composite-plan.ts';
import { tableOf } from './support.ts';

/** One hole from rows of from and to. */
const hole = (rows: readonly (readonly [number, number])[]) => ({
  holeStarts: Int32Array.of(0, rows.length),
  ...tableOf(rows),
});
const sum = (values: Iterable<number>) => [...values].reduce((total, value) => total + value, 0);

const worked = hole([
  [0, 1],
  [1, 2.5],
  [2.5, 4],
  [4, 5],
]);
const workedGrade = { valuesPpm: Float64Array.of(1, 2, 0.5, 3) };
const oneDomain = Int32Array.of(7, 7, 7, 7);

describe('compositing, worked case (computed in python from sum(l g) / sum(l))', () => {
  it('fixed length 2 m: 1.50, 0.875 and a residual of 1 m at 3.0', () => {
    const plan = planComposites(worked, oneDomain, { lengthM: 2, mode: 'fixed' });
    expect([...plan.fromM, ...plan.toM]).toEqual([0, 2, 4, 2, 4, 5]);
    const grade = compositeGrade(plan, workedGrade);
    [1.5, 0.875, 3].forEach((value, i) => expect(grade.valuesPpm[i]).toBeCloseTo(value, 12));
    expect([...plan.isShort]).toEqual([0, 0, 0]);
    expect([...plan.domain]).toEqual([7, 7, 7]);
  });

  it('equal lengths of 2.5 m: 1.60 and 1.50, mean 1.55 kept', () => {
    const plan = planComposites(worked, oneDomain, { lengthM: 2.5 });
    expect([...plan.toM]).toEqual([2.5, 5]);
    const grade = compositeGrade(plan, workedGrade);
    expect(grade.valuesPpm[0]).toBeCloseTo(1.6, 12);
    expect(grade.valuesPpm[1]).toBeCloseTo(1.5, 12);
    expect(grade.keptMetal / 5).toBeCloseTo(1.55, 12);
  });

  it('densities 2.7, 2.8, 3.2, 2.6 give a mean of 1.489510', () => {
    const plan = planComposites(worked, oneDomain, { lengthM: 5 });
    const densityTPerM3 = Float64Array.of(2.7, 2.8, 3.2, 2.6);
    const grade = compositeGrade(plan, workedGrade, { densityTPerM3 });
    expect(grade.valuesPpm[0]).toBeCloseTo(1.48951, 6);
  });
});

describe('domains, breaks and gaps', () => {
  it('cuts at a change of domain, a break and a gap, and leaves out what has no domain', () => {
    const intervals = {
      ...hole([
        [0, 3],
        [3, 5],
        [5, 6],
        [6, 7],
        [7.5, 9],
        [9, 10],
      ]),
      isBreakBefore: Uint8Array.of(0, 0, 0, 1, 0, 0),
    };
    const domain = Int32Array.of(0, 1, 1, 1, 1, NO_DOMAIN);
    const plan = planComposites(intervals, domain, { lengthM: 10 });
    expect([...plan.fromM]).toEqual([0, 3, 6, 7.5]);
    expect([...plan.toM]).toEqual([3, 6, 7, 9]);
    expect([...plan.domain]).toEqual([0, 1, 1, 1]);
    expect([...plan.isShort]).toEqual([1, 1, 1, 1]);
    expect(plan.withoutDomainM).toBe(1);
    const grade = compositeGrade(plan, { valuesPpm: Float64Array.of(1, 2, 3, 4, 5, 100) });
    expect(grade.outside).toEqual({ assayedM: 1, metal: 100 });
  });

  it('starts anew in each hole', () => {
    const two = {
      ...tableOf([
        [0, 4],
        [0, 4],
      ]),
      holeStarts: Int32Array.of(0, 1, 2),
    };
    const plan = planComposites(two, Int32Array.of(0, 0), { lengthM: 2 });
    expect([...plan.holeStarts]).toEqual([0, 2, 4]);
    expect([...plan.fromM]).toEqual([0, 2, 0, 2]);
  });

  it('takes ends within half a centimetre as touching', () => {
    const plan = planComposites(
      hole([
        [0, 1],
        [1.004, 2],
        [1.996, 3],
      ]),
      Int32Array.of(0, 0, 0),
      {
        lengthM: 3,
      },
    );
    expect([plan.fromM.length, plan.toM[0]]).toEqual([1, 3]);
    expect(sum(plan.pieceM)).toBeCloseTo(3, 12);
  });

  it('gives nothing for nothing', () => {
    const plan = planComposites(hole([]), new Int32Array(0), { lengthM: 2 });
    expect(plan.fromM).toHaveLength(0);
    expect(compositeGrade(plan, { valuesPpm: new Float64Array(0) }).keptMetal).toBe(0);
  });
});

describe('residuals of the fixed length', () => {
  const cut = (runM: number, rules: Partial<CompositeRules> = {}) =>
    compositeBreaks(10, 10 + runM, { lengthM: 2, mode: 'fixed', ...rules });

  it.each([
    [4, undefined, [10, 12, 14], false],
    [4.9, undefined, [10, 12, 14.9], false],
    [5, undefined, [10, 12, 14, 15], false],
    [4.9, 'keep', [10, 12, 14, 14.9], false],
    [4.9, 'discard', [10, 12, 14, 14.9], true],
    [5, 'discard', [10, 12, 14, 15], false],
    [0.9, 'append', [10, 10.9], false],
    [0.9, 'discard', [10, 10.9], true],
  ] as const)('%d m, %s: %j', (runM, residual, breaks, isLastDiscarded) => {
    expect(cut(runM, residual ? { residual } : {})).toMatchObject({ breaks, isLastDiscarded });
  });

  it('counts the metres and metal of what was discarded', () => {
    const plan = planComposites(
      hole([
        [0, 2],
        [2, 2.6],
      ]),
      Int32Array.of(0, 0),
      {
        lengthM: 2,
        mode: 'fixed',
        residual: 'discard',
      },
    );
    expect(plan.discarded.count).toBe(1);
    expect(plan.discarded.lengthM).toBeCloseTo(0.6, 12);
    const grade = compositeGrade(plan, { valuesPpm: Float64Array.of(1, 50) });
    expect(grade.outside.metal).toBeCloseTo(30, 9);
    expect(grade.keptMetal).toBeCloseTo(2, 12);
  });

  it('shares 5 m of wanted length 2 m in three: floor(5 / 2 + 1 / 2), so a half rounds up', () => {
    expect(compositeBreaks(0, 5, { lengthM: 2 }).breaks).toEqual([0, 5 / 3, 10 / 3, 5]);
    expect(compositeBreaks(0, 4.9, { lengthM: 2 }).breaks).toHaveLength(3);
  });

  it('keeps equal lengths within 0.75 and 1.5 of the wanted one once a run reaches it', () => {
    fc.assert(
      fc.property(fc.double({ min: 2, max: 900, noNaN: true }), (runM) => {
        const { breaks } = compositeBreaks(0, runM, { lengthM: 2 });
        const shares = breaks.slice(1).map((to, i) => (to - breaks[i]!) / 2);
        expect(Math.min(...shares)).toBeGreaterThanOrEqual(0.75 - 1e-9);
        expect(Math.max(...shares)).toBeLessThan(1.5);
      }),
    );
  });
});

describe('unassayed and replaced length', () => {
  const plan = planComposites(
    hole([
      [0, 1],
      [1, 2],
      [2, 4],
    ]),
    Int32Array.of(3, 3, 3),
    {
      lengthM: 2,
    },
  );

  it('gives no grade where less than half is assayed, and says what is withheld', () => {
    const third = planComposites(
      hole([
        [0, 0.9],
        [0.9, 2],
      ]),
      Int32Array.of(0, 0),
      { lengthM: 2 },
    );
    const grade = compositeGrade(third, { valuesPpm: Float64Array.of(10, NaN) });
    expect(grade.valuesPpm[0]).toBeNaN();
    expect(grade.withheld).toEqual({ count: 1, assayedM: 0.9, metal: 9 });
    expect(grade.assayedShare[0]).toBeCloseTo(0.45, 12);
  });

  it('takes the mean over the assayed part alone', () => {
    const grade = compositeGrade(plan, { valuesPpm: Float64Array.of(10, NaN, NaN) });
    expect(grade.valuesPpm[0]).toBe(10);
    expect(grade.assayedShare[0]).toBe(0.5);
    expect(grade.valuesPpm[1]).toBeNaN();
  });

  it('counts a missing assay as barren only in the domains named', () => {
    const source = { valuesPpm: Float64Array.of(10, NaN, NaN) };
    const grade = compositeGrade(plan, source, { barrenDomains: new Set([3]) });
    expect([...grade.valuesPpm]).toEqual([5, 0]);
    const other = compositeGrade(plan, source, { barrenDomains: new Set([4]) });
    expect(other.valuesPpm[1]).toBeNaN();
  });

  it('carries the share that was replaced', () => {
    const grade = compositeGrade(plan, {
      valuesPpm: Float64Array.of(10, 20, 30),
      isReplaced: Uint8Array.of(1, 0, 0),
    });
    expect([...grade.replacedShare]).toEqual([0.5, 0]);
  });
});

/** Rows of gap (cm), length (cm), grade, domain and residual rule. */
const holes = fc.array(
  fc.array(
    fc.record({
      gap: fc.constantFrom(0, 0, 0, 100),
      length: fc.integer({ min: 1, max: 700 }),
      grade: fc.oneof(fc.double({ min: 0, max: 1e6, noNaN: true }), fc.constant(NaN)),
      domain: fc.integer({ min: -1, max: 2 }),
    }),
    { minLength: 1, maxLength: 12 },
  ),
  { minLength: 1, maxLength: 4 },
);

describe('identities', () => {
  it('conserves metres and metal in every mode', () => {
    const rules = fc.record({
      lengthM: fc.double({ min: 0.5, max: 12, noNaN: true }),
      mode: fc.constantFrom('equal', 'fixed'),
      residual: fc.constantFrom('append', 'keep', 'discard'),
    });
    fc.assert(
      fc.property(holes, rules, (rowsOfHoles, compositing) => {
        const rows = rowsOfHoles.flatMap((steps) => {
          let depth = 0;
          return steps.map(({ gap, length, ...rest }) => {
            const from = depth + gap;
            depth = from + length;
            return { from: from / 100, to: depth / 100, ...rest };
          });
        });
        const starts = rowsOfHoles.reduce((at, steps) => [...at, at.at(-1) + steps.length], [0]);
        const intervals = {
          holeStarts: Int32Array.from(starts),
          ...tableOf(rows.map(({ from, to }) => [from, to] as const)),
        };
        const plan = planComposites(
          intervals,
          Int32Array.from(rows, (row) => row.domain),
          compositing,
        );
        const metres = sum(rows.map(({ from, to }) => to - from));
        const composited = sum(plan.toM.map((to, i) => to - plan.fromM[i]!));
        expect(composited + plan.discarded.lengthM + plan.withoutDomainM).toBeCloseTo(metres, 7);
        expect(sum(plan.pieceM)).toBeCloseTo(metres, 7);
        const grade = compositeGrade(plan, {
          valuesPpm: Float64Array.from(rows, (row) => row.grade),
        });
        const before = sum(
          rows.map((row) => (Number.isNaN(row.grade) ? 0 : (row.to - row.from) * row.grade)),
        );
        const after = grade.keptMetal + grade.withheld.metal + grade.outside.metal;
        expect(Math.abs(after - before)).toBeLessThanOrEqual(1e-9 * (1 + before));
      }),
      { numRuns: 60 },
    );
  });

  it('reproduces a constant grade', () => {
    const plan = planComposites(worked, oneDomain, { lengthM: 0.7, mode: 'fixed' });
    const grade = compositeGrade(plan, { valuesPpm: new Float64Array(4).fill(42) });
    grade.valuesPpm.forEach((value) => expect(value).toBeCloseTo(42, 10));
  });
});

describe('refusals', () => {
  it.each([0, -1, 0.004, NaN, Infinity])('a composite length of %d m', (lengthM) => {
    expect(() => planComposites(hole([]), new Int32Array(0), { lengthM })).toThrow(
      expect.objectContaining({ code: 'bad-parameter' }),
    );
  });

  it('shapes, overlaps, shares, grades and densities that are none', () => {
    const refuses = (code: string, run: () => unknown) =>
      expect(run).toThrow(expect.objectContaining({ code }));
    const plan = planComposites(worked, oneDomain, { lengthM: 2 });
    refuses('shape', () => planComposites(worked, Int32Array.of(0), { lengthM: 2 }));
    refuses('overlap', () =>
      planComposites(
        hole([
          [0, 2],
          [1, 3],
        ]),
        Int32Array.of(0, 0),
        { lengthM: 2 },
      ),
    );
    refuses('bad-interval', () =>
      planComposites(hole([[0, NaN]]), Int32Array.of(0), { lengthM: 2 }),
    );
    refuses('bad-parameter', () =>
      planComposites(worked, oneDomain, { lengthM: 2, leastShare: 1.5 }),
    );
    refuses('shape', () => compositeGrade(plan, { valuesPpm: Float64Array.of(1) }));
    refuses('bad-parameter', () =>
      compositeGrade(plan, { valuesPpm: Float64Array.of(1, -1, 1, 1) }),
    );
    refuses('bad-parameter', () =>
      compositeGrade(plan, { valuesPpm: Float64Array.of(1, Infinity, 1, 1) }),
    );
    refuses('bad-parameter', () => compositeGrade(plan, workedGrade, { leastAssayedShare: -0.1 }));
    expect(() =>
      compositeGrade(plan, workedGrade, { densityTPerM3: Float64Array.of(2.7, NaN, 2.7, 2.7) }),
    ).toThrow('found NaN in row 1');
  });
});
