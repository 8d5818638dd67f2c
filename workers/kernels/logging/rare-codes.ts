import { KernelError } from '#kernels/kernel-error.ts';
import { checkUses, type CodeUse } from './code-synonyms.ts';

/** A code too rare to stand alone, and where it could go. */
export interface RareCode {
  code: string;
  intervals: number;
  metres: number;
  /** Of all metres. */
  share: number;
  /** Nearest code of the same parent that is not rare; null when there is none with chemistry. */
  nearest: string | null;
  /** Aitchison distance of the centres; null with it. */
  distance: number | null;
}

/** Below either a code is rare. */
export const RARE_RULES = { share: 0.01, intervals: 20 } as const;

export interface RareCodesInput {
  uses: readonly CodeUse[];
  /** Parent of each code, in the order of `uses`; null where the hierarchy names none. */
  parents: readonly (string | null)[];
  /** Mean clr of each code, one array a code; null where the code has no assays. */
  centres: readonly (Float64Array | null)[];
}

/**
 * Codes of less than 1 % of the length or fewer than 20 composites, with the code of the same parent
 * nearest to them in chemistry. A proposal; the raw code is never lost.
 *
 * @returns Least metres first.
 * @throws {KernelError} `shape`; `bad-parameter`; `not-finite` with { code } at a centre that is none.
 */
export function rareCodes({ uses, parents, centres }: RareCodesInput): RareCode[] {
  checkUses(uses);
  const nParts = centres.find((centre) => centre !== null)?.length ?? 0;
  if (parents.length !== uses.length || centres.length !== uses.length)
    throw new KernelError(
      'shape',
      `expected ${uses.length} parents and centres, found ${parents.length}, ${centres.length}`,
    );
  centres.forEach((centre, i) => {
    if (centre && centre.length !== nParts)
      throw new KernelError(
        'shape',
        `expected ${nParts} parts in every centre, found ${centre.length}`,
      );
    if (centre && !centre.every(Number.isFinite))
      throw new KernelError('not-finite', `expected a finite centre of ${uses[i]?.code}`, {
        code: uses[i]?.code ?? null,
      });
  });
  const total = uses.reduce((sum, { metres }) => sum + metres, 0);
  const isRare = ({ intervals, metres }: CodeUse) =>
    intervals < RARE_RULES.intervals || metres < RARE_RULES.share * total;
  return uses
    .flatMap((use, i): RareCode[] => {
      if (!isRare(use)) return [];
      const homes = [...uses.keys()].filter(
        (j) => j !== i && !isRare(uses[j]!) && parents[j] === parents[i],
      );
      const near = nearestOf(i, homes, centres);
      return [
        {
          ...use,
          share: total > 0 ? use.metres / total : 0,
          nearest: near ? uses[near.at]!.code : null,
          distance: near?.distance ?? null,
        },
      ];
    })
    .sort((a, b) => a.metres - b.metres);
}

function nearestOf(
  code: number,
  homes: readonly number[],
  centres: readonly (Float64Array | null)[],
): { at: number; distance: number } | null {
  const own = centres[code];
  if (!own) return null;
  let best: { at: number; distance: number } | null = null;
  for (const at of homes) {
    const other = centres[at];
    if (!other) continue;
    const distance = Math.hypot(...own.map((value, part) => value - other[part]!));
    if (!best || distance < best.distance) best = { at, distance };
  }
  return best;
}
