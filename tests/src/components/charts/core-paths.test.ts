import { expect, it } from 'vitest';
import { gradePath, highestGrade, joined, rootShare, slotsOf, structurePath, wallPath } from '#src/components/charts/core-paths.ts';
import type { CoreInterval } from '#src/components/charts/core-types.ts';

const interval = (row: number, over: Partial<CoreInterval> = {}): CoreInterval => ({
  row,
  fromM: row * 10,
  toM: row * 10 + 10,
  groupSlot: 1,
  membership: 0.5,
  grade: 1,
  domain: null,
  ...over,
});
const along = (depthM: number) => depthM;

it('draws a wall as high as its membership', () => {
  expect(wallPath([interval(0), interval(1, { groupSlot: 2 })], 1, along, 0, 20)).toBe('M0 20v-10h10v10z');
  expect(wallPath([interval(0, { membership: null })], 1, along, 0, 20)).toContain('v-20');
});

it('draws grade on a root scale and leaves a gap without assay', () => {
  expect(rootShare(0.25, 1)).toBe(0.5);
  expect(rootShare(2, 0)).toBe(0);
  const path = gradePath([interval(0, { grade: 4 }), interval(1, { grade: null }), interval(2, { grade: 1 })], along, 0, 10, 4);
  expect(path).toBe('M0 10V0H10V10zM20 10V5H30V10z');
});

it('tilts structures by their angle to core, sure and unsure apart', () => {
  const readings = [{ depthM: 50, alphaDeg: 90, sure: true }, { depthM: 60, alphaDeg: null, sure: false }];
  expect(structurePath(readings, true, along, 0, 13)).toBe('M50 11.5L50 1.5');
  expect(structurePath(readings, false, along, 0, 13)).toMatch(/^M56\.46/);
});

it('joins equal neighbours but not across a gap', () => {
  const runs = joined([{ fromM: 0, toM: 5, code: 'A' }, { fromM: 5, toM: 9, code: 'A' }, { fromM: 10, toM: 12, code: 'A' }], (a, b) => a.code === b.code);
  expect(runs.map(({ fromM, toM }) => [fromM, toM])).toEqual([[0, 9], [10, 12]]);
});

it('lists slots in order and the highest grade of all holes', () => {
  expect(slotsOf([interval(0, { groupSlot: 5 }), interval(1, { groupSlot: null }), interval(2)])).toEqual([1, 5]);
  expect(highestGrade([{ intervals: [interval(0, { grade: 2 })] }, { intervals: [interval(1, { grade: null }), interval(2, { grade: 7 })] }])).toBe(7);
});
