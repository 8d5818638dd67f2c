import { KernelError } from '#kernels/kernel-error.ts';
import { seededRandom, type Random } from '#kernels/random.ts';
import { meansOf, requireCoordinates } from './code-space.ts';

/** Spread of chemistry over two levels of a code hierarchy. */
export interface NestedVariance {
  /** Sums of squares over all coordinates; the first three add up to the total. */
  parents: number;
  codes: number;
  within: number;
  total: number;
  /** Codes inside their parents against rows inside codes; null without freedom or spread. */
  fCodes: number | null;
  /** Permuting rows inside parents: nominal, since rows of a hole are dependent. */
  nominalPCodes: number | null;
  /** Parents against codes inside them; null without freedom or spread. */
  fParents: number | null;
  /** Permuting whole codes between parents. */
  pParents: number | null;
}

export interface NestedInput {
  /** n finite values each. */
  coordinates: readonly Float64Array[];
  /** Code of each row, 0..C-1, or -1. */
  codeOf: Int32Array;
  /** Parent of each code, 0..P-1. */
  parentOf: Int32Array;
}

/**
 * Nested sums of squares with permutation p: does the hierarchy of codes follow chemistry, and at which
 * level.
 *
 * @param options.draws Permutations, 999 unless told.
 * @throws {KernelError} `too-few-groups` under two codes; `too-few-rows` at a code without rows;
 *   `shape`; `not-finite` with { row, col }.
 * @see Anderson (2001), Austral Ecology 26, 32-46 (from memory).
 */
export function nestedVariance(
  { coordinates, codeOf, parentOf }: NestedInput,
  options: { seed: number; draws?: number; onProgress?: (share: number) => void },
): NestedVariance {
  const { seed, draws = 999, onProgress } = options;
  const sums = checkedSums({ coordinates, codeOf, parentOf });
  const parts = partsOf(sums);
  const fOfCodes = (codes: number, within: number) =>
    ratio(codes, sums.codeFreedom, within, sums.rowFreedom, parts.total);
  const fOfParents = (parents: number, codes: number) =>
    ratio(parents, sums.parentFreedom, codes, sums.codeFreedom, parts.total);
  const fCodes = fOfCodes(parts.codes, parts.within);
  const fParents = fOfParents(parts.parents, parts.codes);
  const reaches = (f: number | null, observed: number) => (f ?? Infinity) >= observed * (1 - 1e-12);
  const random = seededRandom(seed);
  const rowsByParent = rowsOfParents(codeOf, parentOf);
  const moving = codeOf.slice();
  let [reachedCodes, reachedParents] = [0, 0];
  for (let draw = 0; draw < draws; draw++) {
    if (fCodes !== null) {
      shuffleInside(moving, rowsByParent, random);
      const moved = betweenLevels(sums, meansOf(coordinates, moving, sums.sizes));
      // Shuffling inside parents leaves these where they are, so the rest is within codes.
      const within = parts.codes + parts.within - moved.codes;
      if (reaches(fOfCodes(moved.codes, within), fCodes)) reachedCodes += 1;
    }
    if (fParents !== null) {
      const moved = betweenLevels({ ...sums, parentOf: shuffled(parentOf, random) }, parts.means);
      if (reaches(fOfParents(moved.parents, moved.codes), fParents)) reachedParents += 1;
    }
    onProgress?.((draw + 1) / draws);
  }
  const { parents, codes, within, total } = parts;
  const pOf = (f: number | null, reached: number) =>
    f === null ? null : (1 + reached) / (draws + 1);
  const nominalPCodes = pOf(fCodes, reachedCodes);
  const pParents = pOf(fParents, reachedParents);
  return { parents, codes, within, total, fCodes, nominalPCodes, fParents, pParents };
}

interface Sums extends NestedInput {
  sizes: number[];
  parentFreedom: number;
  codeFreedom: number;
  rowFreedom: number;
}

function checkedSums(input: NestedInput): Sums {
  const { coordinates, codeOf, parentOf } = input;
  requireCoordinates(coordinates, codeOf.length);
  const sizes = sizesOf(codeOf, parentOf.length);
  if (parentOf.length < 2)
    throw new KernelError('too-few-groups', `expected 2 or more codes, found ${parentOf.length}`);
  const code = sizes.indexOf(0);
  if (code >= 0)
    throw new KernelError('too-few-rows', `expected rows of every code, found none of ${code}`, {
      code,
    });
  const n = sizes.reduce((sum, size) => sum + size, 0);
  const nParents = new Set(parentOf).size;
  return {
    ...input,
    sizes,
    parentFreedom: nParents - 1,
    codeFreedom: parentOf.length - nParents,
    rowFreedom: n - parentOf.length,
  };
}

function sizesOf(groupOf: Int32Array, groups: number): number[] {
  const sizes = new Array<number>(groups).fill(0);
  groupOf.forEach((group, row) => {
    if (group >= groups)
      throw new KernelError(
        'shape',
        `expected a code below ${groups}, found ${group} in row ${row}`,
        { row },
      );
    if (group >= 0) sizes[group]! += 1;
  });
  return sizes;
}

/** Mean squares over each other; null without freedom, or when the lower one is rounding noise. */
function ratio(
  above: number,
  df1: number,
  below: number,
  df2: number,
  total: number,
): number | null {
  if (df1 < 1 || df2 < 1 || !(below > 1e-14 * total)) return null;
  return above / df1 / (below / df2);
}

function partsOf(sums: Sums) {
  const { coordinates, codeOf, sizes } = sums;
  const p = coordinates.length;
  const means = meansOf(coordinates, codeOf, sizes);
  let within = 0;
  coordinates.forEach((column, k) => {
    codeOf.forEach((code, row) => {
      if (code >= 0) within += (column[row]! - means[code * p + k]!) ** 2;
    });
  });
  const { parents, codes } = betweenLevels(sums, means);
  return { parents, codes, within, total: parents + codes + within, means };
}

/** Sums of squares of code means about their parents, and of parents about the whole. */
function betweenLevels({ parentOf, sizes, coordinates }: Sums, means: Float64Array) {
  const p = coordinates.length;
  let [parents, codes] = [0, 0];
  const rowsOf = new Float64Array(Math.max(...parentOf) + 1);
  parentOf.forEach((parent, code) => (rowsOf[parent]! += sizes[code]!));
  const n = rowsOf.reduce((sum, rows) => sum + rows, 0);
  for (let k = 0; k < p; k++) {
    const centre = new Float64Array(rowsOf.length);
    parentOf.forEach((parent, code) => {
      centre[parent]! += (sizes[code]! / rowsOf[parent]!) * means[code * p + k]!;
    });
    const whole = centre.reduce((sum, value, parent) => sum + (rowsOf[parent]! / n) * value, 0);
    centre.forEach((value, parent) => (parents += rowsOf[parent]! * (value - whole) ** 2));
    parentOf.forEach((parent, code) => {
      codes += sizes[code]! * (means[code * p + k]! - centre[parent]!) ** 2;
    });
  }
  return { parents, codes };
}

function shuffled(values: Int32Array, random: Random): Int32Array {
  const out = values.slice();
  for (let i = out.length - 1; i > 0; i--) {
    const j = random.below(i + 1);
    [out[i], out[j]] = [out[j]!, out[i]!];
  }
  return out;
}

/** Rows of each parent that has any. */
function rowsOfParents(codeOf: Int32Array, parentOf: Int32Array): Int32Array[] {
  return [...new Set(parentOf)].map((parent) =>
    Int32Array.from(codeOf.keys()).filter(
      (row) => codeOf[row]! >= 0 && parentOf[codeOf[row]!] === parent,
    ),
  );
}

/** Shuffles the codes of rows among the rows of each parent, in place. */
function shuffleInside(
  codeOf: Int32Array,
  rowsByParent: readonly Int32Array[],
  random: Random,
): void {
  for (const rows of rowsByParent) {
    for (let i = rows.length - 1; i > 0; i--) {
      const [a, b] = [rows[i]!, rows[random.below(i + 1)]!];
      const kept = codeOf[a]!;
      codeOf[a] = codeOf[b]!;
      codeOf[b] = kept;
    }
  }
}
