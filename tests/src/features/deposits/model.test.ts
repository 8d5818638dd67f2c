import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { DepositBody } from '#contract/deposits.ts';
import { notchesOf } from '#src/features/deposits/components/deposit-list.tsx';
import {
  bodyOf,
  fieldOf,
  formOf,
  NEW_DEPOSIT,
  splitAnalytes,
} from '#src/features/deposits/model.ts';
import { faultLine, reachOf, traceOf } from '#src/lib/hole-traces.ts';
import { niceStep, notchStep, rulerOf } from '#src/features/deposits/ruler.ts';
import { setNumberLocale } from '#src/lib/format.ts';

setNumberLocale('en-GB');

describe('the form of a deposit', () => {
  it('gives a body the contract takes once it is named', () => {
    expect(DepositBody.safeParse(bodyOf({ ...NEW_DEPOSIT, name: 'Tarnfell' })).success).toBe(true);
    expect(bodyOf(NEW_DEPOSIT).deleteriousAnalytes).toEqual(['As', 'Sb', 'Bi']);
  });

  it('comes back from a stored deposit unchanged', () => {
    const stored = {
      ...DepositBody.parse({
        ...bodyOf({ ...NEW_DEPOSIT, name: 'A', gridKind: 'epsg', epsgCode: '25833' }),
      }),
      id: 1,
      isDemo: false,
      version: 1,
      createdAt: '2026-01-01T00:00:00Z',
      myRole: 'lead',
      leads: [],
    } as const;
    const { name, description, grid, payAnalytes, deleteriousAnalytes } = stored;
    expect(bodyOf(formOf({ ...stored, leads: [] }))).toEqual({
      name,
      description,
      grid,
      payAnalytes,
      deleteriousAnalytes,
    });
  });

  it('splits elements at commas, semicolons and spaces', () => {
    expect(splitAnalytes(' As, Sb;Bi  Hg,')).toEqual(['As', 'Sb', 'Bi', 'Hg']);
  });

  it.each([
    [['grid', 'code'], 'epsgCode'],
    [['grid', 'name'], 'gridName'],
    [['deleteriousAnalytes', 1], 'deleterious'],
    [['payAnalytes', 0, 'analyte'], 'payAnalytes.0.analyte'],
  ])('the path %j is the field %s', (path, field) => {
    expect(fieldOf(path)).toBe(field);
  });
});

describe('the ruler', () => {
  it('has whole steps of 1, 2 or 5 and never too many', () => {
    fc.assert(
      fc.property(fc.double({ min: 1, max: 5e6, noNaN: true }), (length) => {
        const step = niceStep(length, 6);
        expect(length / step).toBeLessThanOrEqual(6);
        expect(String(step)).toMatch(/^[125]0*$/);
      }),
    );
  });

  it('counts kilometres from 2 km on', () => {
    expect(rulerOf(7712).major.map(({ label }) => label)).toEqual(['0 km', '2', '4', '6']);
    expect(rulerOf(850).major.map(({ label }) => label)).toEqual([
      '0 m',
      '200',
      '400',
      '600',
      '800',
    ]);
    expect(rulerOf(7712).minor.every((share) => share > 0 && share < 1)).toBe(true);
  });

  it('breaks the core each 1,000 m, or wider where that would crowd', () => {
    expect([notchStep(7712), notchStep(500), notchStep(120_000)]).toEqual([1000, 50, 10_000]);
    expect(notchesOf(3000, 6000)).toEqual([1 / 6, 2 / 6, 3 / 6]);
  });
});

describe('the plan', () => {
  const hole = {
    hole: 'A',
    x: 0,
    y: 0,
    z: 100,
    lengthM: 50,
    assayedM: 40,
    intervals: 0,
    firstRow: 0,
    campaign: null,
    trace: [
      [0, 0, 100],
      [30, 0, 60],
      [30, 0, 50],
    ] satisfies [number, number, number][],
  };

  it('measures depth along the trace', () => {
    // 3-4-5 triangle: 30 east and 40 down is 50 m of hole.
    expect(traceOf(hole).points.map(({ depthM }) => depthM)).toEqual([0, 50, 60]);
  });

  const fault = { name: 'Garron', x: 50, y: 50, z: 0, dip: 60 };
  const reach = { low: [0, 0], high: [100, 200] } as const;

  it.each([
    // A plane dipping east strikes north; one dipping north strikes east; dipping south-east strikes north-east.
    [
      90,
      [
        [50, 0],
        [50, 200],
      ],
    ],
    [
      0,
      [
        [0, 50],
        [100, 50],
      ],
    ],
    [
      135,
      [
        [100, 100],
        [0, 0],
      ],
    ],
  ])('a fault dipping towards %i degrees is drawn along its strike', (dipDirection, points) => {
    const rounded = (faultLine({ ...fault, dipDirection }, reach)?.points ?? []).map(
      ([east, north]) => [Math.round(east * 1e6) / 1e6, Math.round(north * 1e6) / 1e6],
    );
    expect(rounded).toHaveLength(2);
    expect(rounded).toEqual(expect.arrayContaining(points));
  });

  it('leaves out a fault that passes the holes by', () => {
    expect(faultLine({ ...fault, x: 500, dipDirection: 90 }, reach)).toBeNull();
  });

  it('has no reach without holes', () => {
    expect(reachOf([])).toBeNull();
    expect(reachOf([hole])).toEqual({ low: [0, 0], high: [30, 0] });
  });
});
