import { KernelError } from '#kernels/kernel-error.ts';
import { checkCategory, NOT_LOGGED, type Category } from '#kernels/tables/category.ts';

/** How much of one domain is flagged. */
export interface FlaggedShare {
  code: string;
  metres: number;
  flaggedMetres: number;
  /** flaggedMetres / metres; null in a domain without metres. */
  share: number | null;
}

/**
 * Metres of each domain and how many of them are flagged; the metres add up to those given.
 *
 * @param domains A code for every interval (`UNASSIGNED` is a code).
 * @param lengthsM Interval lengths, >= 0.
 * @param isFlagged 1 where flagged.
 * @returns One per level of `domains`, in its order.
 * @throws {KernelError} `shape`; `bad-parameter` with { row } at an interval without a code or with a
 *   length that is none.
 */
export function flaggedShares(
  domains: Category,
  lengthsM: Float64Array,
  isFlagged: Uint8Array,
): FlaggedShare[] {
  const n = lengthsM.length;
  checkCategory(domains, n, 'domain');
  if (isFlagged.length !== n)
    throw new KernelError('shape', `expected ${n} flags, found ${isFlagged.length}`);
  const metres = new Float64Array(domains.levels.length);
  const flagged = new Float64Array(domains.levels.length);
  for (let row = 0; row < n; row++) {
    const code = domains.codes[row]!;
    const length = lengthsM[row]!;
    if (code === NOT_LOGGED || !(length >= 0 && length < Infinity)) {
      const message = `expected a code and a length >= 0 m in row ${row}, found ${code}, ${length}`;
      throw new KernelError('bad-parameter', message, { row });
    }
    metres[code]! += length;
    if (isFlagged[row] === 1) flagged[code]! += length;
  }
  return domains.levels.map((code, i) => ({
    code,
    metres: metres[i]!,
    flaggedMetres: flagged[i]!,
    share: metres[i]! > 0 ? flagged[i]! / metres[i]! : null,
  }));
}
