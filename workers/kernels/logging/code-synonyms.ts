import { KernelError } from '#kernels/kernel-error.ts';
import { compareCodePoints } from '#kernels/tables/category.ts';

/** How often one code was logged. */
export interface CodeUse {
  code: string;
  intervals: number;
  metres: number;
}

/** Codes that differ in writing only. */
export interface SynonymGroup {
  /** The most used one, by metres. */
  keep: string;
  /** The others, most used first. */
  merge: string[];
  metres: number;
}

/**
 * A code without what writing adds to it: compatible letters made the same, case, spaces and
 * punctuation taken off.
 *
 * @returns Empty when nothing but punctuation is left.
 */
export function normaliseCode(code: string): string {
  return code
    .normalize('NFKC')
    .toLocaleLowerCase('en')
    .replace(/[^\p{Letter}\p{Mark}\p{Number}]/gu, '');
}

/**
 * Groups of codes written in different ways; to be confirmed by a person. Codes of punctuation alone
 * stay by themselves.
 *
 * @returns Groups of two and more, most metres first.
 * @throws {KernelError} `bad-parameter` at a code listed twice, or intervals or metres below 0.
 */
export function synonymGroups(uses: readonly CodeUse[]): SynonymGroup[] {
  checkUses(uses);
  const groups = new Map<string, CodeUse[]>();
  for (const use of uses) {
    const key = normaliseCode(use.code);
    if (key !== '') groups.set(key, [...(groups.get(key) ?? []), use]);
  }
  return [...groups.values()]
    .filter((group) => group.length > 1)
    .map((group) => {
      const [keep, ...merge] = [...group].sort(
        (a, b) =>
          b.metres - a.metres || b.intervals - a.intervals || compareCodePoints(a.code, b.code),
      );
      return {
        keep: keep?.code ?? '',
        merge: merge.map(({ code }) => code),
        metres: group.reduce((sum, { metres }) => sum + metres, 0),
      };
    })
    .sort((a, b) => b.metres - a.metres || compareCodePoints(a.keep, b.keep));
}

/** @throws {KernelError} `bad-parameter` with { code }. */
export function checkUses(uses: readonly CodeUse[]): void {
  const seen = new Set<string>();
  for (const { code, intervals, metres } of uses) {
    const isCount = intervals >= 0 && metres >= 0 && metres < Infinity;
    if (isCount && !seen.has(code)) {
      seen.add(code);
      continue;
    }
    const found = isCount ? `${code} twice` : `${intervals} and ${metres} for ${code}`;
    throw new KernelError(
      'bad-parameter',
      `expected codes once, with counts and metres >= 0, found ${found}`,
      {
        code,
      },
    );
  }
}
