import { describe, expect, it } from 'vitest';
import { assayCell } from '#src/features/holes/assay-cells.ts';
import { holeFinding, holesFinding } from '#src/features/holes/finding.ts';
import { findHoles, gradeLimits, planTraces } from '#src/features/holes/hole-plan.ts';
import { stripIntervals, stripStructures, weatheringOrder } from '#src/features/holes/hole-strip-data.ts';
import { shownUnit } from '#src/features/holes/units.ts';
import { HOLE, holeRow } from './hole-data.ts';

const cell = (row: number, column: number, unit: '%' | 'ppm') => assayCell(HOLE.assays[row]!, column, unit);

describe('an assay in the table', () => {
  it.each([
    ['nothing where it was not analysed', cell(0, 1, '%'), { look: 'plain', text: '', value: null }],
    ['"none" where the sample is missing', cell(0, 0, 'ppm'), { look: 'missing', text: 'none', value: null }],
    ['the limit with its sign below it', cell(1, 0, 'ppm'), { look: 'below', text: '<2', value: '<2' }],
    ['the limit with its sign above it, in the unit shown', cell(1, 1, '%'), { look: 'above', text: '>1', value: '>1' }],
    ['the grade in the unit shown', cell(2, 1, '%'), { look: 'plain', text: '0.53', value: 0.53 }],
  ])('shows %s', (_what, shown, wanted) => {
    expect(shown).toEqual(wanted);
  });
});

describe('the core of a hole', () => {
  it('leaves a gap where nothing is assayed and converts the grade', () => {
    expect(stripIntervals(HOLE, 'Cu', '%').map(({ grade }) => grade)).toEqual([null, 1, 0.53]);
  });

  it('draws a reading of poor confidence as unsure', () => {
    expect(stripStructures(HOLE)).toEqual([{ depthM: 12, alphaDeg: 40, sure: true }, { depthM: 15, alphaDeg: null, sure: false }]);
  });

  it('orders weathering from the ground down, by the middle of its metres', () => {
    expect(weatheringOrder([{ fromM: 20, toM: 60, code: 'FR' }, { fromM: 0, toM: 15, code: 'OX' }, { fromM: 15, toM: 20, code: 'TR' }, { fromM: 60, toM: 62, code: 'OX' }])).toEqual(['OX', 'TR', 'FR']);
  });

  it('is told in a sentence', () => {
    expect(holeFinding(HOLE).replaceAll('\u00a0', ' ')).toBe('30.0 m, campaign 1, 80 % assayed. Mostly AND, 20.0 m of it; 2 structures measured.');
  });
});

describe('holes on the plan', () => {
  it('colours intervals by six steps of grade', () => {
    const grades = { values: Float64Array.of(0.1, NaN, 9), fromM: Float64Array.of(0, 10, 20), toM: Float64Array.of(10, 20, 30), limits: [1, 2, 3, 4, 5] };
    expect(planTraces([holeRow()], grades)[0]?.intervals.map(({ row, stop }) => [row, stop])).toEqual([[0, 1], [1, null], [2, 6]]);
  });

  it('lets the pointer find a hole that has no grades', () => {
    const [trace] = planTraces([holeRow({ intervals: 0 })], null);
    expect(trace?.intervals.map(({ fromM, toM }) => [fromM, toM])).toEqual([[0, 10], [10, 20], [20, 30]]);
  });

  it('takes the steps from the percentiles of what is measured', () => {
    const values = Float64Array.from({ length: 101 }, (_, i) => (i === 100 ? NaN : i));
    expect(gradeLimits(values)).toEqual([50, 75, 90, 95, 99]);
    expect(gradeLimits(Float64Array.of(NaN))).toEqual([]);
  });

  it('finds holes by name and campaign', () => {
    const holes = [holeRow(), holeRow({ hole: 'TFD-012', campaign: null })];
    expect(findHoles(holes, ' 012 ').map(({ hole }) => hole)).toEqual(['TFD-012']);
    expect(findHoles(holes, '1')).toHaveLength(2);
  });

  it('tells how far they are assayed and which are bare', () => {
    expect(holesFinding([holeRow(), holeRow({ hole: 'B', assayedM: 0 })], []).replaceAll('\u00a0', ' ')).toBe('2 holes of 60.0 m in all, 40 % assayed. 1 hole has no assays.');
  });
});

it.each([
  ['Cu', '%'],
  ['Al', '%'],
  ['As', 'ppm'],
  ['LOI', 'ppm'],
])('shows %s in %s: the deposit’s unit, else that of the file, else ppm', (analyte, unit) => {
  const summaries = [{ analyte: 'Cu', originalUnit: 'ppm' }, { analyte: 'Al', originalUnit: '%' }, { analyte: 'LOI', originalUnit: '% LOI' }];
  expect(shownUnit(analyte, [{ analyte: 'Cu', unit: '%' }], summaries)).toBe(unit);
});
