import { KernelError } from '#kernels/kernel-error.ts';
import { mixedness } from '#kernels/populations/mixedness.ts';
import type { Category } from '#kernels/tables/category.ts';
import { energyTest } from '#kernels/tables/energy-distance.ts';
import { pairsOf } from '#kernels/tables/grouped-values.ts';
import { checkHoleStarts } from '#kernels/tables/hole-shift.ts';
import { benjaminiHochberg } from '#kernels/tables/multiple-tests.ts';
import { averageLinkage, type TreeJoin } from '#kernels/clustering/average-linkage.ts';
import {
  centreDistances,
  codeSpace,
  MIN_CODE_ROWS,
  standardisedDistances,
  type CodeSpace,
} from './code-space.ts';
import { nestedVariance, type NestedVariance } from './nested-variance.ts';

export interface LikenessInput {
  /** Isometric log-ratio coordinates or component scores of n composites; the first is looked at for splits. */
  coordinates: readonly Float64Array[];
  /** Code of each composite that one code dominates, else NOT_LOGGED. */
  codes: Category;
  /** Parent of each level of the codes; null where the hierarchy names none. */
  parents: readonly (string | null)[];
  /** First row of each hole, then n. */
  holeStarts: Int32Array;
}

/** Two codes against each other. */
export interface CodePair {
  first: string;
  second: string;
  /** Distance of their centres, and the same in units of the pooled spread within codes. */
  distance: number;
  standardised: number;
  energy: number;
  /** By shifts within holes, Benjamini-Hochberg over the pairs. */
  pAdjusted: number;
  /** Whether one code could do for both: p above .05 and less than one spread apart. */
  proposesMerge: boolean;
}

export interface CodeLikeness {
  levels: string[];
  sizes: number[];
  /** Listed, not tested. */
  tooFew: CodeSpace['tooFew'];
  pairs: CodePair[];
  /** Average linkage on the distances of centres; leaves in the order of `levels`. */
  tree: TreeJoin[];
  /** Null when codes have no parents, or all the same. */
  nested: NestedVariance | null;
  /** Codes whose nearest code belongs to another parent. */
  crossings: { level: string; parent: string; nearest: string; nearestParent: string }[];
  /** Codes whose first coordinate is mixed: BIC of one population less that of two, 10 or more. */
  splits: { level: string; mixing: number }[];
}

/** Limits of the readings (project rule). */
export const LIKENESS_RULES = { p: 0.05, standardised: 1, mixing: 10 } as const;

export interface LikenessOptions {
  seed: number;
  draws?: number;
  minRows?: number;
  /** Most rows of a code in a pair test, at equal steps down the table; 100 unless told. */
  maxRows?: number;
  onProgress?: (share: number) => void;
}

/**
 * Do logging codes differ in rock, and at which level of their hierarchy: distances, a tree to set
 * beside the parents, pair tests, nested sums of squares. Proposals for the geologist, never changes.
 *
 * @throws {KernelError} As `codeSpace`; `singular`; `shape` when parents do not match the levels.
 */
export function codeLikeness(input: LikenessInput, options: LikenessOptions): CodeLikeness {
  const { coordinates, codes, parents, holeStarts } = input;
  const { seed, draws, minRows = MIN_CODE_ROWS, maxRows = 100, onProgress } = options;
  const n = checkHoleStarts(holeStarts);
  if (codes.codes.length !== n || parents.length !== codes.levels.length)
    throw new KernelError(
      'shape',
      `expected ${n} codes and ${codes.levels.length} parents, found ${codes.codes.length} and ${parents.length}`,
    );
  const space = codeSpace(coordinates, codes, minRows);
  const k = space.levels.length;
  const [plain, standardised] = [centreDistances(space), standardisedDistances(space)];
  const places = pairsOf(k);
  const tests = places.map(([a, b], at) => {
    const isFirst = Int8Array.from(space.codeOf, (code) => (code === a ? 1 : code === b ? 0 : -1));
    const test = energyTest(coordinates, isFirst, holeStarts, {
      seed: seed + at,
      maxRows,
      ...(draws ? { draws } : {}),
    });
    onProgress?.((at + 1) / places.length);
    return test;
  });
  const adjusted = benjaminiHochberg(Float64Array.from(tests, ({ p }) => p));
  const pairs = places.map(([a, b], at): CodePair => {
    const [pAdjusted, apart] = [adjusted[at]!, standardised[a * k + b]!];
    return {
      first: space.levels[a]!,
      second: space.levels[b]!,
      distance: plain[a * k + b]!,
      standardised: apart,
      energy: tests[at]!.distance,
      pAdjusted,
      proposesMerge: pAdjusted > LIKENESS_RULES.p && apart < LIKENESS_RULES.standardised,
    };
  });
  const parentOf = space.levels.map((level) => parents[codes.levels.indexOf(level)] ?? null);
  return {
    levels: space.levels,
    sizes: space.sizes,
    tooFew: space.tooFew,
    pairs,
    tree: averageLinkage(plain, k),
    nested: nestedOf(coordinates, space, parentOf, seed, draws),
    crossings: crossingsOf(space.levels, parentOf, plain),
    splits: splitsOf(coordinates[0]!, space, seed),
  };
}

/** Nested sums of squares of the codes that have a parent. */
function nestedOf(
  coordinates: readonly Float64Array[],
  space: CodeSpace,
  parentOf: readonly (string | null)[],
  seed: number,
  draws: number | undefined,
): NestedVariance | null {
  const named = [...parentOf.keys()].filter((code) => parentOf[code] !== null);
  const names = [...new Set(named.map((code) => parentOf[code]))];
  if (names.length < 2 || named.length <= names.length) return null;
  const place = Int32Array.from(parentOf, (_, code) => named.indexOf(code));
  return nestedVariance(
    {
      coordinates,
      codeOf: space.codeOf.map((code) => (code < 0 ? -1 : place[code]!)),
      parentOf: Int32Array.from(named, (code) => names.indexOf(parentOf[code])),
    },
    { seed, ...(draws ? { draws } : {}) },
  );
}

function crossingsOf(
  levels: readonly string[],
  parentOf: readonly (string | null)[],
  distances: Float64Array,
): CodeLikeness['crossings'] {
  const k = levels.length;
  return levels.flatMap((level, a) => {
    const others = [...levels.keys()].filter((b) => b !== a);
    const nearest = others.reduce((best, b) =>
      distances[a * k + b]! < distances[a * k + best]! ? b : best,
    );
    const [parent, nearestParent] = [parentOf[a] ?? null, parentOf[nearest] ?? null];
    if (parent === null || nearestParent === null || parent === nearestParent) return [];
    return [{ level, parent, nearest: levels[nearest]!, nearestParent }];
  });
}

function splitsOf(
  first: Float64Array,
  { levels, codeOf }: CodeSpace,
  seed: number,
): CodeLikeness['splits'] {
  return levels.flatMap((level, code) => {
    const mixing = mixedness(
      first.filter((_, row) => codeOf[row] === code),
      seed,
    );
    return mixing >= LIKENESS_RULES.mixing ? [{ level, mixing }] : [];
  });
}
