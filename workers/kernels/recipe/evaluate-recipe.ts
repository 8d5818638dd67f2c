import { KernelError } from '#kernels/kernel-error.ts';
import { compareCodePoints, type Category } from '#kernels/tables/category.ts';
import { evaluateCondition, TRUTH, type Condition, type RuleColumn } from './condition.ts';
import { codeLevels, UNASSIGNED } from './domain-codes.ts';

/** A condition that gives a code; of several that hold, the lowest priority number wins. */
export interface RecipeRule {
  code: string;
  priority: number;
  when: Condition;
}

/** A code set by hand, over any rule. */
export interface CodeOverride {
  row: number;
  code: string;
  reason: string;
}

/** What a rule reached, in metres. */
export interface RuleCoverage {
  matchedM: number;
  /** Metres that carry its code by it; rules of one priority and code share them. */
  wonM: number;
  /** matchedM - wonM. */
  shadowedM: number;
}

export interface RecipeResult {
  /** One code for every interval, UNASSIGNED included. */
  domains: Category;
  /** Intervals where rules of one priority give different codes: unassigned unless overridden. */
  conflicts: { row: number; codes: string[] }[];
  /** In the order of the rules. */
  coverage: RuleCoverage[];
  /** 1 where an override set the code. */
  isOverridden: Uint8Array;
  /** Rules that win nothing. */
  notes: string[];
}

/**
 * Runs a recipe: rules by priority, then overrides. Only a condition known to hold matches. The order
 * of the rules does not matter.
 *
 * @param columns Columns the conditions name, n values each.
 * @param lengthsM n interval lengths in metres, >= 0.
 * @throws {KernelError} `bad-parameter` with { row } at a length that is none, at a rule without code or integer priority, or an override
 *   without reason, outside the table, or of a row overridden twice; else as `evaluateCondition`.
 */
export function evaluateRecipe(
  rules: readonly RecipeRule[],
  overrides: readonly CodeOverride[],
  columns: ReadonlyMap<string, RuleColumn>,
  lengthsM: Float64Array,
  onProgress?: (share: number) => void,
): RecipeResult {
  const n = lengthsM.length;
  checkRecipe(rules, overrides, n);
  const bad = lengthsM.findIndex((length) => !(length >= 0 && length < Infinity));
  if (bad >= 0) {
    const message = `expected a length >= 0 m, found ${lengthsM[bad]} in row ${bad}`;
    throw new KernelError('bad-parameter', message, { row: bad });
  }
  const levels = codeLevels([...rules, ...overrides].map(({ code }) => code));
  const codeOf = new Map(levels.map((level, code) => [level, code]));
  const matches = rules.map(({ when }, i) => {
    const truths = evaluateCondition(when, columns, n);
    onProgress?.((i + 1) / rules.length);
    return truths;
  });
  const conflicts: RecipeResult['conflicts'] = [];
  const coverage = rules.map(() => ({ matchedM: 0, wonM: 0, shadowedM: 0 }));
  const isOverridden = new Uint8Array(n);
  const codes = new Int32Array(n).fill(codeOf.get(UNASSIGNED) ?? 0);
  for (const { row, code } of overrides) {
    isOverridden[row] = 1;
    codes[row] = codeOf.get(code) ?? 0;
  }
  for (let row = 0; row < n; row++) {
    const matched = rules.flatMap((_, i) => (matches[i]![row] === TRUTH.yes ? [i] : []));
    const winners = winnersOf(matched, rules);
    const given = [...new Set(winners.map((i) => rules[i]!.code))].sort(compareCodePoints);
    for (const i of matched) coverage[i]!.matchedM += lengthsM[row]!;
    if (given.length > 1) conflicts.push({ row, codes: given });
    const [code] = given;
    if (given.length !== 1 || code === undefined || isOverridden[row] === 1) continue;
    codes[row] = codeOf.get(code) ?? 0;
    for (const i of winners) coverage[i]!.wonM += lengthsM[row]!;
  }
  for (const rule of coverage) rule.shadowedM = rule.matchedM - rule.wonM;
  return {
    domains: { levels, codes },
    conflicts,
    coverage,
    isOverridden,
    notes: deadRules(rules, coverage),
  };
}

function winnersOf(matched: number[], rules: readonly RecipeRule[]): number[] {
  const best = Math.min(...matched.map((i) => rules[i]!.priority));
  return matched.filter((i) => rules[i]!.priority === best);
}

function deadRules(rules: readonly RecipeRule[], coverage: readonly RuleCoverage[]): string[] {
  return rules.flatMap(({ code, priority }, i) =>
    coverage[i]!.wonM > 0 ? [] : [`Rule ${i + 1} (${code}, priority ${priority}) wins no metres.`],
  );
}

function checkRecipe(
  rules: readonly RecipeRule[],
  overrides: readonly CodeOverride[],
  n: number,
): void {
  rules.forEach(({ code, priority }, rule) => {
    if (code !== '' && Number.isInteger(priority)) return;
    const message = `expected a code and a whole priority in rule ${rule + 1}, found "${code}", ${priority}`;
    throw new KernelError('bad-parameter', message, { rule });
  });
  const seen = new Set<number>();
  for (const { row, code, reason } of overrides) {
    const isInside = Number.isInteger(row) && row >= 0 && row < n;
    if (!isInside || code === '' || reason.trim() === '') {
      const message = `expected a row below ${n}, a code and a reason, found ${row}, "${code}", "${reason}"`;
      throw new KernelError('bad-parameter', message, { row });
    }
    if (seen.has(row))
      throw new KernelError('bad-parameter', `row ${row} is overridden twice`, { row });
    seen.add(row);
  }
}
