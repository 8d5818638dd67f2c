import { expect, it } from 'vitest';
import type { DomainList } from '#contract/domains.ts';
import { groupShares, weightedMean } from '#src/features/tray/selection-sums.ts';
import { domainsByGroup, layHole, metresByHole, runOfGroup, tellingHoles } from '#src/features/tray/tray-data.ts';
import { groupingFor } from '#src/features/tray/use-tray-layers.ts';
import { columns, frame, grouping, hole } from '../analysis-fixtures.ts';

const domain = { code: 'CST', slot: 3, groupLabels: [2], id: 1, name: 'Stringer', rationale: 'r', groupingId: 4, intervals: 2, metres: 4, version: 1, createdBy: { id: 1, name: 'R. Okonjo' }, createdAt: '', updatedAt: '', hasEvidence: false, evidenceIsStale: false };
const domains: DomainList = { groupingId: 4, domains: [domain], unassigned: { intervals: 5, metres: 10 }, total: { intervals: 7, metres: 14 }, isStale: false };
const layers = { frame, grouping, columns, domains };

it('lays a hole with groups, membership, grade in the unit shown, and domains of its groups', () => {
  const laid = layHole(hole, layers, { analyte: 'Cu', ppmPerUnit: 10_000 });
  expect(laid.intervals.map(({ row, groupSlot, membership, grade, domain: own }) => [row, groupSlot, membership, grade, own?.code])).toEqual([
    [0, 1, 0.9, null, undefined], // marked as not analysed: no grade, never zero
    [1, 1, 0.9, 0.02, undefined],
    [2, 2, 0.8, 1, 'CST'],
    [3, 2, 0.5, 2, 'CST'],
  ]);
  expect(laid.structures.map(({ sure }) => sure)).toEqual([true, false]);
});

it('shows no domain where domains stand on another grouping', () => {
  expect(domainsByGroup(grouping, { ...domains, groupingId: 9 }).size).toBe(0);
  expect(domainsByGroup(null, domains).size).toBe(0);
});

it('takes the run an interval lies in, not across a hole or a gap', () => {
  expect(runOfGroup(frame, columns.label, 1)).toEqual([0, 1]);
  expect(runOfGroup(frame, columns.label, 5)).toEqual([4, 5, 6]);
  expect(runOfGroup(frame, columns.label, 7)).toEqual([7]);
});

it('sums metres by hole and leaves surface samples out', () => {
  expect(metresByHole(frame, [0, 1, 2, 5, 8])).toEqual([
    { hole: 'TFD-001', metres: 6, intervals: 3 },
    { hole: 'TFD-002', metres: 2, intervals: 1 },
  ]);
});

it('lays first the holes that cut most groups', () => {
  expect(tellingHoles(frame, columns, 1)).toEqual(['TFD-001']);
});

it('weights means by metres and leaves rows without a value out', () => {
  expect(weightedMean(Float64Array.of(1, 4, NaN), Float64Array.of(3, 1, 5), [0, 1, 2])).toBe(1.75);
  expect(weightedMean(Float64Array.of(NaN), Float64Array.of(1), [0])).toBeNull();
});

it('divides a selection among its groups, rows of none last', () => {
  expect(groupShares(layers, [1, 2, 3, 7])).toEqual([
    { name: 'Stringer', slot: 2, share: 0.5 },
    { name: 'Andesite', slot: 1, share: 0.25 },
    { name: 'in no group', slot: null, share: 0.25 },
  ]);
});

it('never colours the rows of one frame by the groups of another', () => {
  const choice = { frameTableId: 12, grouping };
  expect(groupingFor(choice, [grouping], 12)).toBeNull();
  expect(groupingFor({}, [grouping], 11)).toBe(grouping);
  expect(groupingFor({ grouping: null }, [grouping], 11)).toBeNull();
});
