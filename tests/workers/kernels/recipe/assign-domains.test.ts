import fc from 'fast-check';
import { expect, it } from 'vitest';
import { assignDomains } from '#kernels/recipe/assign-domains.ts';
import { metresByCode, UNASSIGNED } from '#kernels/recipe/domain-codes.ts';

const labels = Int32Array.of(1, 2, 3, 0, 2, 4);
const lengths = Float64Array.of(1, 2, 3, 4, 5, 6);
const codesOf = ({ domains }: ReturnType<typeof assignDomains>) =>
  [...domains.codes].map((code) => domains.levels[code]);

it('gives each interval the code of its group and lists what no rule claims', () => {
  const rules = [
    { code: 'OXI', groupLabels: [1, 3] },
    { code: 'SUL', groupLabels: [2] },
  ];
  const assigned = assignDomains(labels, rules, lengths);
  expect(codesOf(assigned)).toEqual(['OXI', 'SUL', 'OXI', UNASSIGNED, 'SUL', UNASSIGNED]);
  expect(assigned.conflicts).toEqual([]);
  expect(assigned.unclaimed).toEqual([{ groupLabel: 4, codes: [], intervals: 1, metres: 6 }]);
});

it('leaves a group unassigned that two codes claim, and says so', () => {
  const rules = [
    { code: 'SUL', groupLabels: [2, 1] },
    { code: 'OXI', groupLabels: [2, 3, 4] },
    { code: 'SUL', groupLabels: [1] },
  ];
  const assigned = assignDomains(labels, rules, lengths);
  expect(codesOf(assigned)).toEqual(['SUL', UNASSIGNED, 'OXI', UNASSIGNED, UNASSIGNED, 'OXI']);
  expect(assigned.conflicts).toEqual([
    { groupLabel: 2, codes: ['OXI', 'SUL'], intervals: 2, metres: 7 },
  ]);
});

it('takes no rules and no intervals', () => {
  expect(new Set(codesOf(assignDomains(labels, [], lengths)))).toEqual(new Set([UNASSIGNED]));
  const none = assignDomains(new Int32Array(0), [], new Float64Array(0));
  expect(metresByCode(none.domains, new Float64Array(0))).toEqual([
    { code: UNASSIGNED, intervals: 0, metres: 0 },
  ]);
});

it('gives every interval one code, conserves metres, and ignores the order of rules', () => {
  const rule = fc.record({
    code: fc.constantFrom('A', 'B', 'C'),
    groupLabels: fc.uniqueArray(fc.integer({ min: 1, max: 6 }), { maxLength: 3 }),
  });
  const interval = fc.tuple(
    fc.integer({ min: -1, max: 6 }),
    fc.double({ min: 0, max: 9, noNaN: true }),
  );
  fc.assert(
    fc.property(
      fc.array(rule, { maxLength: 5 }),
      fc.array(interval, { maxLength: 40 }),
      (rules, rows) => {
        const groups = Int32Array.from(rows, ([group]) => group);
        const metres = Float64Array.from(rows, ([, length]) => length);
        const assigned = assignDomains(groups, rules, metres);
        const totals = metresByCode(assigned.domains, metres);
        const sum = (values: number[]) => values.reduce((total, value) => total + value, 0);
        expect(sum(totals.map((total) => total.intervals))).toBe(rows.length);
        expect(sum(totals.map((total) => total.metres))).toBeCloseTo(sum([...metres]), 8);
        expect(assignDomains(groups, [...rules].reverse(), metres)).toEqual(assigned);
      },
    ),
  );
});

it('does not mind how groups are numbered', () => {
  const rules = [
    { code: 'A', groupLabels: [1, 2] },
    { code: 'B', groupLabels: [3] },
  ];
  const renumbered = assignDomains(
    labels.map((label) => (label > 0 ? 10 - label : label)),
    rules.map(({ code, groupLabels }) => ({
      code,
      groupLabels: groupLabels.map((label) => 10 - label),
    })),
    lengths,
  );
  expect(codesOf(renumbered)).toEqual(codesOf(assignDomains(labels, rules, lengths)));
});

it('refuses bad shapes, codes and labels', () => {
  expect(() => assignDomains(labels, [], new Float64Array(2))).toThrow(
    'expected 6 lengths, found 2',
  );
  expect(() => assignDomains(labels, [{ code: '', groupLabels: [1] }], lengths)).toThrow(
    'found an empty one',
  );
  expect(() => assignDomains(labels, [{ code: 'A', groupLabels: [0] }], lengths)).toThrow(
    'labels from 1 for A, found 0',
  );
  const unset = { levels: ['A'], codes: Int32Array.of(-1) };
  expect(() => metresByCode(unset, Float64Array.of(1))).toThrow('expected a code');
  const negative = { levels: ['A'], codes: Int32Array.of(0) };
  expect(() => metresByCode(negative, Float64Array.of(-1))).toThrow('found 0, -1');
});
