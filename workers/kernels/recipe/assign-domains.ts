import { KernelError } from '#kernels/kernel-error.ts';
import { compareCodePoints, type Category } from '#kernels/tables/category.ts';
import { codeLevels, UNASSIGNED } from './domain-codes.ts';

/** Groups that make one domain. */
export interface GroupRule {
  code: string;
  groupLabels: readonly number[];
}

/** A group that no rule, or more than one code, claims; its intervals are unassigned. */
export interface GroupProblem {
  groupLabel: number;
  /** Codes that claim it, sorted; empty when none does. */
  codes: string[];
  intervals: number;
  metres: number;
}

export interface AssignedDomains {
  /** One code for every interval, UNASSIGNED included. */
  domains: Category;
  /** Groups claimed by two or more different codes. */
  conflicts: GroupProblem[];
  /** Groups present that no rule claims. */
  unclaimed: GroupProblem[];
}

/**
 * Gives every interval exactly one domain code by its group. The order of the rules does not matter:
 * a group claimed by two codes is a conflict and its intervals stay unassigned.
 *
 * @param groupLabels Label of each interval, > 0; 0 or less where it has no group.
 * @param rules Which groups make which code; a code may stand in several rules.
 * @param lengthsM Interval lengths in metres.
 * @throws {KernelError} `shape`; `bad-parameter` at a code that is empty or a group label < 1.
 */
export function assignDomains(
  groupLabels: Int32Array,
  rules: readonly GroupRule[],
  lengthsM: Float64Array,
): AssignedDomains {
  if (groupLabels.length !== lengthsM.length) {
    throw new KernelError(
      'shape',
      `expected ${groupLabels.length} lengths, found ${lengthsM.length}`,
    );
  }
  const claims = claimsByGroup(rules);
  const levels = codeLevels(rules.map(({ code }) => code));
  const codeOf = new Map(levels.map((level, code) => [level, code]));
  const unassigned = codeOf.get(UNASSIGNED) ?? 0;
  const codeByGroup = new Map<number, number>();
  for (const [group, [code, ...more]] of claims) {
    codeByGroup.set(
      group,
      more.length > 0 || code === undefined ? unassigned : (codeOf.get(code) ?? unassigned),
    );
  }
  const problems = new Map<number, GroupProblem>();
  const codes = groupLabels.map((label, row) => {
    const claimed = claims.get(label) ?? [];
    if (label > 0 && claimed.length !== 1) {
      const problem = problems.get(label) ?? {
        groupLabel: label,
        codes: claimed,
        intervals: 0,
        metres: 0,
      };
      problem.intervals += 1;
      problem.metres += lengthsM[row]!;
      problems.set(label, problem);
    }
    return codeByGroup.get(label) ?? unassigned;
  });
  const listed = [...problems.values()].sort((a, b) => a.groupLabel - b.groupLabel);
  return {
    domains: { levels, codes },
    conflicts: listed.filter((problem) => problem.codes.length > 1),
    unclaimed: listed.filter((problem) => problem.codes.length === 0),
  };
}

/** Different codes that claim each group, sorted. */
function claimsByGroup(rules: readonly GroupRule[]): Map<number, string[]> {
  const claims = new Map<number, string[]>();
  for (const { code, groupLabels } of rules) {
    if (code === '')
      throw new KernelError('bad-parameter', 'expected a domain code, found an empty one');
    for (const label of groupLabels) {
      if (!(Number.isInteger(label) && label >= 1)) {
        const message = `expected group labels from 1 for ${code}, found ${label}`;
        throw new KernelError('bad-parameter', message, { code, label });
      }
      const codes = new Set([...(claims.get(label) ?? []), code]);
      claims.set(label, [...codes].sort(compareCodePoints));
    }
  }
  return claims;
}
