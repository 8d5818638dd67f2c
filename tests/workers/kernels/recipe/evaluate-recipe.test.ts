import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  evaluateCondition,
  TRUTH,
  type Condition,
  type RuleColumn,
} from '#kernels/recipe/condition.ts';
import { metresByCode, UNASSIGNED } from '#kernels/recipe/domain-codes.ts';
import { evaluateRecipe, type RecipeRule } from '#kernels/recipe/evaluate-recipe.ts';
import { categoryFrom } from '#kernels/tables/category.ts';

const columns = new Map<string, RuleColumn>([
  ['lithology', categoryFrom(['tuff', 'vein', null, 'tuff'])],
  ['Cu', Float64Array.of(4, 5, 6, NaN)],
]);
const copper = (min: number | null, max: number | null = null): Condition => ({
  kind: 'between',
  column: 'Cu',
  min,
  max,
});
const rock = (...levels: string[]): Condition => ({ kind: 'is', column: 'lithology', levels });
const answers = (condition: Condition) => [...evaluateCondition(condition, columns, 4)];
const { no, unknown, yes } = TRUTH;

describe('conditions', () => {
  it('bounds are [min, max); a missing value is unknown', () => {
    expect(answers(copper(5))).toEqual([no, yes, yes, unknown]);
    expect(answers(copper(null, 5))).toEqual([yes, no, no, unknown]);
    expect(answers(copper(5, 6))).toEqual([no, yes, no, unknown]);
    expect(answers(rock('tuff'))).toEqual([yes, no, unknown, yes]);
    expect(answers(rock('tuff', 'vein', 'other'))).toEqual([yes, yes, unknown, yes]);
  });

  it('has the truth tables of three-valued logic (Kleene 1952)', () => {
    const [first, second] = [
      Int32Array.of(0, 0, 0, 1, 1, 1, -1, -1, -1),
      Int32Array.of(0, 1, -1, 0, 1, -1, 0, 1, -1),
    ];
    const levels = ['n', 'y'];
    const table = new Map<string, RuleColumn>([
      ['a', { levels, codes: first }],
      ['b', { levels, codes: second }],
    ]);
    const of: Condition[] = ['a', 'b'].map((column) => ({ kind: 'is', column, levels: ['y'] }));
    const all = [no, no, no, no, yes, unknown, no, unknown, unknown];
    const any = [no, yes, unknown, yes, yes, yes, unknown, yes, unknown];
    expect([...evaluateCondition({ kind: 'all', of }, table, 9)]).toEqual(all);
    expect([...evaluateCondition({ kind: 'any', of }, table, 9)]).toEqual(any);
  });

  it('(null > 5) or yes matches; not (null > 5) does not', () => {
    expect(answers({ kind: 'any', of: [copper(5), rock('tuff')] })[3]).toBe(yes);
    expect(answers({ kind: 'not', of: copper(5) })[3]).toBe(unknown);
    expect(answers({ kind: 'all', of: [] })).toEqual([yes, yes, yes, yes]);
    expect(answers({ kind: 'any', of: [] })).toEqual([no, no, no, no]);
  });

  it('refuses unknown columns, wrong kinds and empty bounds', () => {
    expect(() => answers({ kind: 'is', column: 'x', levels: [] })).toThrow(
      'expected one of lithology, Cu, found x',
    );
    expect(() => answers({ kind: 'is', column: 'Cu', levels: [] })).toThrow(
      'expected labels in Cu',
    );
    expect(() => answers({ kind: 'between', column: 'lithology', min: 1, max: 2 })).toThrow(
      'expected numbers in lithology',
    );
    expect(() => answers(copper(5, 5))).toThrow(
      'expected a lower bound below the upper, found 5 to 5',
    );
    expect(() => evaluateCondition(copper(1), columns, 9)).toThrow(
      'expected 9 values of Cu, found 4',
    );
  });
});

const lengths = Float64Array.of(1, 2, 3, 4);
const run = (rules: RecipeRule[], overrides: Parameters<typeof evaluateRecipe>[1] = []) => {
  const result = evaluateRecipe(rules, overrides, columns, lengths);
  return { ...result, codes: [...result.domains.codes].map((code) => result.domains.levels[code]) };
};

describe('recipe', () => {
  it('lets the lowest priority number win and counts what each rule covers', () => {
    const result = run([
      { code: 'HIGH', priority: 1, when: copper(5) },
      { code: 'TUFF', priority: 2, when: rock('tuff') },
      { code: 'ROCK', priority: 3, when: rock('tuff', 'vein') },
    ]);
    expect(result.codes).toEqual(['TUFF', 'HIGH', 'HIGH', 'TUFF']);
    expect(result.coverage).toEqual([
      { matchedM: 5, wonM: 5, shadowedM: 0 },
      { matchedM: 5, wonM: 5, shadowedM: 0 },
      { matchedM: 7, wonM: 0, shadowedM: 7 },
    ]);
    expect(result.notes).toEqual(['Rule 3 (ROCK, priority 3) wins no metres.']);
  });

  it('leaves an interval unassigned where rules of one priority disagree, and where none matches', () => {
    const result = run([
      { code: 'A', priority: 1, when: copper(5) },
      { code: 'B', priority: 1, when: rock('vein') },
    ]);
    expect(result.codes).toEqual([UNASSIGNED, UNASSIGNED, 'A', UNASSIGNED]);
    expect(result.conflicts).toEqual([{ row: 1, codes: ['A', 'B'] }]);
  });

  it('puts an override over any rule', () => {
    const result = run(
      [{ code: 'A', priority: 1, when: rock('tuff') }],
      [{ row: 0, code: 'X', reason: 'seen in core' }],
    );
    expect(result.codes).toEqual(['X', UNASSIGNED, UNASSIGNED, 'A']);
    expect([...result.isOverridden]).toEqual([1, 0, 0, 0]);
    expect(result.coverage[0]).toEqual({ matchedM: 5, wonM: 4, shadowedM: 1 });
  });

  it('gives each interval one code whatever the order of rules, and reports progress', () => {
    const condition = fc.constantFrom(copper(5), copper(null, 5), rock('tuff'), rock('vein'), {
      kind: 'not' as const,
      of: rock('tuff'),
    });
    const rule = fc.record({
      code: fc.constantFrom('A', 'B', 'C'),
      priority: fc.integer({ min: 1, max: 3 }),
      when: condition,
    });
    fc.assert(
      fc.property(fc.array(rule, { maxLength: 6 }), (rules) => {
        const result = run(rules);
        const turned = run([...rules].reverse());
        expect(turned.codes).toEqual(result.codes);
        expect(turned.conflicts).toEqual(result.conflicts);
        expect([...turned.coverage].reverse()).toEqual(result.coverage);
        expect(
          metresByCode(result.domains, lengths).reduce((sum, { metres }) => sum + metres, 0),
        ).toBe(10);
      }),
    );
    const shares: number[] = [];
    const rules = [1, 2].map((priority) => ({ code: 'A', priority, when: copper(5) }));
    evaluateRecipe(rules, [], columns, lengths, (share) => shares.push(share));
    expect(shares).toEqual([0.5, 1]);
  });

  it('refuses rules and overrides that are incomplete', () => {
    expect(() => run([{ code: '', priority: 1, when: copper(5) }])).toThrow(
      'in rule 1, found "", 1',
    );
    expect(() => run([{ code: 'A', priority: 1.5, when: copper(5) }])).toThrow(
      'whole priority in rule 1',
    );
    expect(() => run([], [{ row: 4, code: 'A', reason: 'seen' }])).toThrow(
      'expected a row below 4',
    );
    expect(() => run([], [{ row: 0, code: 'A', reason: ' ' }])).toThrow('a reason');
    const twice = { row: 0, code: 'A', reason: 'seen' };
    expect(() => run([], [twice, twice])).toThrow('row 0 is overridden twice');
  });
});
