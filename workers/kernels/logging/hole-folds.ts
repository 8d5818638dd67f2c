import { seededRandom } from '#kernels/random.ts';
import { checkHoleStarts } from '#kernels/tables/hole-shift.ts';

/** Most holes that are left out one by one. */
const ONE_BY_ONE = 30;
const FOLDS = 10;

/**
 * Fold of each row for cross-validation by hole: rows of one hole never stand on both sides. Up to 30
 * holes are left out one by one, more are dealt out to 10 folds by seed.
 *
 * @param holeStarts First row of each hole, then n. Holes without rows get no fold.
 * @returns n folds from 0, and their number.
 * @throws {KernelError} `shape`.
 */
export function holeFolds(
  holeStarts: Int32Array,
  seed: number,
): { foldOf: Int32Array; folds: number } {
  const n = checkHoleStarts(holeStarts);
  const holes = [...holeStarts.keys()].filter((h) => holeStarts[h]! < (holeStarts[h + 1] ?? n));
  const folds = holes.length <= ONE_BY_ONE ? holes.length : FOLDS;
  const random = seededRandom(seed);
  if (holes.length > ONE_BY_ONE) {
    for (let i = holes.length - 1; i > 0; i--) {
      const j = random.below(i + 1);
      [holes[i], holes[j]] = [holes[j]!, holes[i]!];
    }
  }
  const foldOf = new Int32Array(n);
  holes.forEach((hole, i) => foldOf.fill(i % folds, holeStarts[hole], holeStarts[hole + 1]));
  return { foldOf, folds };
}
