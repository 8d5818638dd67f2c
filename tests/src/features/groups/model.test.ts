import { expect, it } from 'vitest';
import { categoryOf, groupsFinding, mainGroups, partOrder, scattered, shareBetween, sweepFor, sweepPanels } from '#src/features/groups/model.ts';
import { groupingInHand } from '#src/features/groups/use-grouping.ts';
import { columns, frame, group, grouping, run, sweep } from '../analysis-fixtures.ts';

const scatteredGroup = group(2, 'Speckle', { intervals: 5, metres: 10, contiguity: { runs: 5, expectedRuns: 5.2, kappa: 0.04, meanRunM: 2 } });

it('says which groups hold, what lies between, and what the sweep prefers', () => {
  expect(groupsFinding(grouping, { betweenShare: 2 / 14, sweep })).toBe('Two groups hold in runs longer than chance, the shortest 5.0\u00a0m (Andesite). 14\u00a0% of the metres lie between groups. By silhouette the sweep prefers three.');
  expect(groupsFinding(grouping, { betweenShare: 0.001, sweep: { ...sweep, suggestedK: 2 } })).toBe('Two groups hold in runs longer than chance, the shortest 5.0\u00a0m (Andesite).');
});

it('names a group that only speckles', () => {
  const speckled = { ...grouping, groups: [group(1, 'Andesite'), scatteredGroup] };
  expect(groupsFinding(speckled, { betweenShare: null, sweep: null })).toBe('One of two groups hold; Speckle comes in runs hardly longer than chance.');
  expect(scattered(scatteredGroup)).toContain('hardly longer than chance');
  expect(scattered(group(1, 'Andesite'))).toBeNull();
});

it('claims no contiguity of surface samples', () => {
  expect(groupsFinding({ ...grouping, support: 'surface' }, { betweenShare: null, sweep: null })).toBe('Two groups of surface samples, mean silhouette 0.70; without holes, contiguity is not judged.');
});

it('weighs what lies between groups by metres', () => {
  expect(shareBetween(columns.membership, frame.weight)).toBeCloseTo(2 / 14, 12);
  expect(shareBetween(Float64Array.of(NaN), Float64Array.of(1))).toBeNull();
});

it('takes the sweep of the same components and shows its criteria apart', () => {
  const other = { ...sweep, id: 2, componentRunId: 8 };
  expect(sweepFor([other, sweep], grouping, null)).toBe(sweep);
  expect(sweepFor([other], grouping, null)).toBeNull();
  expect(sweepPanels(sweep).map(({ series }) => series[0]?.points)).toEqual([[{ x: 2, y: 0.6 }, { x: 3, y: 0.7 }], [{ x: 2, y: 0.03 }, { x: 3, y: 0.04 }]]);
});

it('orders elements as the first component opposes them', () => {
  expect(partOrder(['Cu', 'Na', 'Zn'], run)).toEqual([0, 2, 1]);
  expect(partOrder(['Cu', 'Na'], null)).toEqual([0, 1]);
});

it('colours rows by the place of their group and leaves others plain', () => {
  expect([...categoryOf(Float64Array.of(2, 1, NaN, 9), grouping.groups)]).toEqual([1, 0, NaN, NaN]);
});

it('proposes a domain of the groups a selection mainly lies in', () => {
  expect(mainGroups(columns.label, frame.weight, [0, 2, 3])).toEqual([2, 1]);
  expect(mainGroups(columns.label, frame.weight, [7, 8])).toEqual([]);
});

it('opens the grouping of the address, else the one domains stand on', () => {
  const newer = { ...grouping, id: 5, isActive: false };
  expect(groupingInHand([newer, grouping], 5)).toBe(newer);
  expect(groupingInHand([newer, grouping], 99)).toBe(grouping);
  expect(groupingInHand([], null)).toBeNull();
});
