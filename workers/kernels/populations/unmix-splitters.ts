import { KernelError } from '#kernels/kernel-error.ts';
import { quantiles } from '#kernels/statistics/quantile.ts';
import { rankCorrelation } from '#kernels/statistics/rank-correlation.ts';
import { checkCategory, NOT_LOGGED, type Category } from '#kernels/tables/category.ts';

/** A column that may explain a mixed population; never one computed from the grade looked at. */
export type UnmixSplitter =
  | { name: string; kind: 'category'; category: Category }
  /** NaN where not measured. */
  | { name: string; kind: 'numeric'; values: Float64Array };

/** A splitter made ready: its rows in bins, and the ways of putting the bins together. */
export interface PreparedSplitter {
  name: string;
  /** Bin of each row. */
  binOf: Int32Array;
  binSizes: Int32Array;
  /** Candidate splits: a class for each bin, with the cut they stand for. */
  candidates: { cut: number | null; classOfBin: Int32Array; classNames: string[] }[];
}

/** A splitter left out and why. */
export interface SkippedSplitter {
  name: string;
  reason: string;
}

export const OTHER = 'other';
export const MISSING = 'not logged';

const DECILES = [0.1, 0.2, 0.3, 0.4, 0.5, 0.6, 0.7, 0.8, 0.9];
/** A column in the same order as the grade, up to a hair, is the grade in other words. */
const SAME_ORDER = 0.999;

/**
 * Makes splitters ready. Levels of fewer than `minRows` rows are pooled as `other`; rows that are not
 * logged or measured are a class of their own. Numeric columns are cut at their deciles, where both
 * sides keep `minRows`.
 *
 * @param target Coordinates looked at, one column each, n finite values.
 * @returns Splitters with at least one candidate of two classes, and those left out.
 * @throws {KernelError} `shape`; `bad-parameter` at a code without level or a name used twice;
 *   `not-finite` at an infinity; `built-on-target` with { splitter } for a numeric column in the order
 *   of the target, since a cut on the grade itself always explains it and means nothing.
 */
export function prepareSplitters(
  splitters: readonly UnmixSplitter[],
  target: readonly Float64Array[],
  minRows: number,
): { prepared: PreparedSplitter[]; skipped: SkippedSplitter[] } {
  const n = target[0]?.length ?? 0;
  const prepared: PreparedSplitter[] = [];
  const skipped: SkippedSplitter[] = [];
  const names = new Set<string>();
  for (const splitter of splitters) {
    if (names.has(splitter.name))
      throw new KernelError(
        'bad-parameter',
        `expected splitters with names of their own, found ${splitter.name} twice`,
      );
    names.add(splitter.name);
    if (splitter.kind === 'numeric') refuseTarget(splitter.name, splitter.values, target);
    const ready =
      splitter.kind === 'category'
        ? fromCategory(splitter.name, splitter.category, n, minRows)
        : fromNumbers(splitter.name, splitter.values, minRows);
    if (ready.candidates.length > 0) prepared.push(ready);
    else
      skipped.push({
        name: splitter.name,
        reason: `It does not give two classes of ${minRows} rows or more.`,
      });
  }
  return { prepared, skipped };
}

function fromCategory(
  name: string,
  category: Category,
  n: number,
  minRows: number,
): PreparedSplitter {
  checkCategory(category, n, name);
  const sizes = new Int32Array(category.levels.length + 1);
  for (const code of category.codes)
    sizes[code === NOT_LOGGED ? category.levels.length : code]! += 1;
  const kept = [...sizes.keys()].filter((level) => sizes[level]! >= minRows);
  const hasOther = sizes.some((size) => size > 0 && size < minRows);
  const classNames = [
    ...kept.map((level) => category.levels[level] ?? MISSING),
    ...(hasOther ? [OTHER] : []),
  ];
  const binOfLevel = Int32Array.from(sizes, (_, level) => {
    const place = kept.indexOf(level);
    return place < 0 ? kept.length : place;
  });
  const binOf = category.codes.map(
    (code) => binOfLevel[code === NOT_LOGGED ? category.levels.length : code]!,
  );
  const classOfBin = Int32Array.from(classNames.keys());
  const candidates = classNames.length >= 2 ? [{ cut: null, classOfBin, classNames }] : [];
  return { name, binOf, binSizes: sizesOf(binOf, classNames.length), candidates };
}

function fromNumbers(name: string, values: Float64Array, minRows: number): PreparedSplitter {
  const present = values.filter((value) => !Number.isNaN(value));
  const cuts = present.length < 2 ? [] : [...new Set(quantiles(present, DECILES))];
  const missing = cuts.length + 1;
  const binOf = Int32Array.from(values, (value) =>
    Number.isNaN(value) ? missing : cuts.filter((cut) => value >= cut).length,
  );
  const binSizes = sizesOf(binOf, cuts.length + 2);
  const hasMissing = binSizes[missing]! > 0;
  const candidates = cuts.flatMap((cut, at) => {
    const classOfBin = Int32Array.from(binSizes, (_, bin) =>
      bin === missing ? 2 : bin > at ? 1 : 0,
    );
    const below = binSizes.subarray(0, at + 1).reduce((sum, size) => sum + size, 0);
    if (below < minRows || present.length - below < minRows) return [];
    const shown = Number(cut.toPrecision(4));
    const classNames = [`below ${shown}`, `from ${shown}`, ...(hasMissing ? [MISSING] : [])];
    return [{ cut, classOfBin, classNames }];
  });
  return { name, binOf, binSizes, candidates };
}

function sizesOf(binOf: Int32Array, bins: number): Int32Array {
  const sizes = new Int32Array(bins);
  for (const bin of binOf) sizes[bin]! += 1;
  return sizes;
}

function refuseTarget(name: string, values: Float64Array, target: readonly Float64Array[]): void {
  for (const column of target) {
    if (column.length !== values.length)
      throw new KernelError(
        'shape',
        `expected ${column.length} values of ${name}, found ${values.length}`,
      );
    const rows = [...values.keys()].filter((row) => !Number.isNaN(values[row]));
    if (rows.length < 3) return;
    const own = Float64Array.from(rows, (row) => values[row]!);
    const rho = rankCorrelation(
      own,
      Float64Array.from(rows, (row) => column[row]!),
    );
    if (rho !== null && Math.abs(rho) >= SAME_ORDER)
      throw new KernelError(
        'built-on-target',
        `expected splitters that are not computed from the grade looked at, found ${name} in its order`,
        { splitter: name },
      );
  }
}
