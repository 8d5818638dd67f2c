import { KernelError } from '#kernels/kernel-error.ts';
import { mixedness } from './mixedness.ts';
import { unmixGuard, type GuardOptions, type SplitEffect } from './unmix-guard.ts';
import {
  prepareSplitters,
  type PreparedSplitter,
  type SkippedSplitter,
  type UnmixSplitter,
} from './unmix-splitters.ts';

/** Rows of one candidate domain and what may split them. */
export interface UnmixInput {
  /** First ln grade (or a component's scores), then further coordinates; n finite values each. */
  target: readonly Float64Array[];
  /** First row of each hole, then n; rows in order down each hole. */
  holeStarts: Int32Array;
  splitters: readonly UnmixSplitter[];
}

/** One class of a split. */
export interface UnmixClass {
  name: string;
  n: number;
  /** Mean of the first coordinate. */
  mean: number;
  /** How mixed the class still is, as `mixedness`. */
  mixing: number;
}

/** A proposed split; it needs a geological reason, given by a person. */
export interface UnmixSplit extends Omit<SplitEffect, 'candidate'> {
  name: string;
  /** The cut of a numeric splitter. */
  cut: number | null;
  classes: UnmixClass[];
  /** Class of each row. */
  classOf: Int32Array;
  /** 1 less the mixing left in the classes over that of the whole, in [0, 1]. */
  resolved: number;
}

export interface UnmixResult {
  /** 1 on the whole domain, 2 inside a class of a split. */
  depth: 1 | 2;
  n: number;
  /** How mixed the rows are. */
  mixing: number;
  /** Splits that pass the guard, the one that resolves most first. */
  splits: UnmixSplit[];
  /** Splits that do not, the one that explains most first. */
  notShown: UnmixSplit[];
  skipped: SkippedSplitter[];
  shifts: number;
  enumerated: boolean;
  /** Why there is nothing to list; null otherwise. */
  note: string | null;
}

export interface UnmixOptions extends GuardOptions {
  /** Levels with fewer rows are pooled, and no cut leaves fewer; 20 unless told. */
  minRows?: number;
}

/** Limits (project rule). */
export const UNMIX_RULES = { mixing: 10, p: 0.05, minRows: 20 } as const;

/**
 * Looks for the geological split that best resolves a mixed population, without hunting until chance
 * obliges: only splits that pass the guard of `unmixGuard` at p .05 are listed, by the share of mixing
 * they resolve.
 *
 * @throws {KernelError} As `prepareSplitters` and `unmixGuard`.
 */
export function unmixSearch(input: UnmixInput, options: UnmixOptions): UnmixResult {
  return search(input, options, 1);
}

/**
 * The search once more, guard and all, inside one class of a split; it goes no deeper.
 *
 * @param result Of `unmixSearch` on the same input.
 * @throws {KernelError} `bad-parameter` when the split or class is not in the result, or the result is
 *   itself of a second search; else as `unmixSearch`.
 */
export function unmixInside(
  input: UnmixInput,
  result: UnmixResult,
  { split, className }: { split: string; className: string },
  options: UnmixOptions,
): UnmixResult {
  const chosen = [...result.splits, ...result.notShown].find(({ name }) => name === split);
  const at = chosen?.classes.findIndex(({ name }) => name === className) ?? -1;
  if (result.depth !== 1 || !chosen || at < 0)
    throw new KernelError(
      'bad-parameter',
      `expected a class of a first search, found ${split}: ${className} at depth ${result.depth}`,
    );
  return search(
    rowsOf(input, (row) => chosen.classOf[row] === at),
    options,
    2,
  );
}

function search(input: UnmixInput, options: UnmixOptions, depth: 1 | 2): UnmixResult {
  const { seed, minRows = UNMIX_RULES.minRows } = options;
  const [first] = input.target;
  if (!first) throw new KernelError('shape', 'expected a column of ln grade, found none');
  const { prepared, skipped } = prepareSplitters(input.splitters, input.target, minRows);
  const mixing = mixedness(first, seed);
  const base = { depth, n: first.length, mixing, skipped };
  const nothing = { splits: [], notShown: [], shifts: 0, enumerated: false };
  if (mixing < UNMIX_RULES.mixing) {
    const note = `Nothing to resolve: two populations lower BIC by ${mixing.toFixed(1)}, less than ${UNMIX_RULES.mixing}.`;
    return { ...base, ...nothing, note };
  }
  if (prepared.length === 0)
    return { ...base, ...nothing, note: `No splitter gives two classes of ${minRows} rows.` };
  const { effects, shifts, enumerated } = unmixGuard(
    input.target,
    prepared,
    input.holeStarts,
    options,
  );
  const splits = prepared.map((splitter, i) =>
    described(splitter, effects[i]!, first, mixing, seed),
  );
  const passes = ({ pAdjusted }: UnmixSplit) => pAdjusted <= UNMIX_RULES.p;
  return {
    ...base,
    splits: splits
      .filter(passes)
      .sort((a, b) => b.resolved - a.resolved || b.epsilonSquared - a.epsilonSquared),
    notShown: splits
      .filter((split) => !passes(split))
      .sort((a, b) => b.epsilonSquared - a.epsilonSquared),
    shifts,
    enumerated,
    note: null,
  };
}

function described(
  { name, binOf, candidates }: PreparedSplitter,
  { candidate, ...effect }: SplitEffect,
  y: Float64Array,
  mixing: number,
  seed: number,
): UnmixSplit {
  const { cut, classOfBin, classNames } = candidates[candidate]!;
  const classOf = binOf.map((bin) => classOfBin[bin]!);
  const classes = classNames.map((className, at) => {
    const own = y.filter((_, row) => classOf[row] === at);
    const mean = own.reduce((sum, value) => sum + value, 0) / own.length;
    return { name: className, n: own.length, mean, mixing: mixedness(own, seed) };
  });
  const left = classes.reduce((sum, own) => sum + own.mixing, 0);
  const resolved = Math.min(1, Math.max(0, 1 - left / mixing));
  return { name, cut, classes, classOf, resolved, ...effect };
}

/** The input with some of its rows, hole by hole. */
function rowsOf(
  { target, holeStarts, splitters }: UnmixInput,
  isKept: (row: number) => boolean,
): UnmixInput {
  const keep = (_: number, row: number) => isKept(row);
  let kept = 0;
  const starts = holeStarts.map((start, hole) => {
    const from = hole === 0 ? start : holeStarts[hole - 1]!;
    for (let row = from; row < start; row++) if (isKept(row)) kept += 1;
    return kept;
  });
  return {
    target: target.map((column) => column.filter(keep)),
    holeStarts: starts,
    splitters: splitters.map((splitter) =>
      splitter.kind === 'numeric'
        ? { ...splitter, values: splitter.values.filter(keep) }
        : {
            ...splitter,
            category: { ...splitter.category, codes: splitter.category.codes.filter(keep) },
          },
    ),
  };
}
