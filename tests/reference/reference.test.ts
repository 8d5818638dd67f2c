import { describe, expect, it } from 'vitest';
import { loadReference, referenceNames } from '#tests/support/reference.ts';
import { outcomeLine, runChecks } from './run-checks.ts';

const sets = referenceNames().map((name) => loadReference(name));

describe.each(sets)('reference values of $name', (set) => {
  const groups = [...new Set(set.checks.map(({ group }) => group))];

  it.each(groups)('%s', (group) => {
    const outcomes = runChecks(set, set.checksOf(group));
    const failed = outcomes.filter(({ verdict }) => verdict === 'failed');
    expect(failed.map(outcomeLine), `${failed.length} of ${outcomes.length} fall short`).toEqual(
      [],
    );
  });
});

describe('the runner', () => {
  const set = loadReference('meuse');

  it('runs 1,075 checks and leaves none out', () => {
    expect(sets.flatMap(({ checks }) => checks)).toHaveLength(1075);
    expect(sets.flatMap(({ unreadable }) => unreadable)).toEqual([]);
  });

  it('fails a check whose function it does not know', () => {
    const [check] = set.checks.map((known) => ({ ...known, function: 'no_such_function' }));
    const [outcome] = runChecks(set, check ? [check] : []);
    expect(outcome?.verdict).toBe('failed');
    expect(outcome && outcomeLine(outcome)).toContain('found logratio no_such_function');
  });

  it('fails a wrong value and a kernel that refuses, and goes on', () => {
    const check = set.check('meuse.zinc.percentiles');
    const broken = { ...check, inputs: { ...check.inputs, probabilities: [2] } };
    const shifted = { ...check, value: [check.value].flat().map((x) => Number(x) + 1) };
    const outcomes = runChecks(set, [broken, shifted, check]);
    expect(outcomes.map(({ verdict }) => verdict)).toEqual(['failed', 'failed', 'passed']);
    expect(outcomes.map(outcomeLine).join()).toMatch(
      /an error: expected a probability.*\[0\] expected 114, found 113/,
    );
  });

  it('computes what is marked fragile or collapsed, as information', () => {
    const check = { ...set.check('meuse.zinc.percentiles'), fragile: true };
    expect(runChecks(set, [check])[0]).toMatchObject({ verdict: 'information', shortfalls: [] });
  });
});
