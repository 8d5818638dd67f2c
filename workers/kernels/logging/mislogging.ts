import { KernelError } from '#kernels/kernel-error.ts';
import { checkCategory, NOT_LOGGED, type Category } from '#kernels/tables/category.ts';
import { lengthsOf, type IntervalsByHole } from '#kernels/tables/intervals-by-hole.ts';
import { agreementOf, type Agreement } from './confusion.ts';
import { crossValidate, type FitClassifier } from './cross-validate.ts';
import { flaggedRuns, type MisloggingFlag } from './mislogging-flags.ts';
import { MISLOGGING_RULES } from './mislogging-rules.ts';

/** How well one classifier gives the logged codes back. */
export interface ClassifierReport {
  name: string;
  /** Row-major (classes, classes), logged by row and answered by column. */
  counts: Float64Array;
  metres: Float64Array;
  /** Of the counts. */
  agreement: Agreement;
  nUnscored: number;
}

export interface Mislogging {
  /** Codes looked at. */
  classes: string[];
  /** Codes left out: too few rows or holes. */
  leftOut: { level: string; rows: number; holes: number }[];
  folds: number;
  reports: ClassifierReport[];
  /** Questions for the core, never relabellings. */
  flags: MisloggingFlag[];
  notes: string[];
}

export interface MisloggingOptions {
  seed: number;
  onProgress?: (share: number) => void;
}

/**
 * Intervals whose chemistry denies their log. Every classifier is trained on other holes; an interval is
 * flagged when all of them deny the logged code and mean the same other one, over two or more successive
 * composites away from logged contacts.
 *
 * @param intervals Composites in order down each hole; `isBreakBefore` marks faults.
 * @param logged Code of each composite, or NOT_LOGGED.
 * @param classifiers By name, at least one; a discriminant and a nearest-neighbour rule as a pair.
 * @throws {KernelError} `too-few-groups` when fewer than two codes have rows and holes enough; those of
 *   the classifiers; `shape`; `bad-interval`; `overlap`; `bad-parameter`.
 * @see Fisher (1936); Cover & Hart (1967) for the usual pair of classifiers (from memory).
 */
export function suspectMislogging(
  intervals: IntervalsByHole,
  logged: Category,
  classifiers: ReadonlyMap<string, FitClassifier>,
  { seed, onProgress }: MisloggingOptions,
): Mislogging {
  if (classifiers.size === 0)
    throw new KernelError('bad-parameter', 'expected a classifier, found none');
  checkCategory(logged, intervals.fromM.length, 'logging');
  const { kept, leftOut } = classesOf(logged, intervals.holeStarts);
  if (kept.length < 2)
    throw new KernelError(
      'too-few-groups',
      `expected 2 or more codes of ${MISLOGGING_RULES.rows} rows in ${MISLOGGING_RULES.holes} holes, found ${kept.length}`,
    );
  const classOf = logged.codes.map((code) => kept.indexOf(code));
  const lengths = lengthsOf(intervals);
  const validated = [...classifiers].map(([name, fit], i) => {
    const found = crossValidate(fit, classOf, kept.length, intervals.holeStarts, {
      seed,
      onProgress: (share) => onProgress?.((i + share) / classifiers.size),
    });
    return { ...found, name };
  });
  const reports = validated.map(({ name, probabilities, nUnscored }): ClassifierReport => {
    const tables = confusion(probabilities, classOf, kept.length, lengths);
    return { name, nUnscored, ...tables, agreement: agreementOf(tables.counts, kept.length) };
  });
  const weak = reports.filter(({ agreement }) => (agreement.kappa ?? 0) < MISLOGGING_RULES.kappa);
  const notes = [
    ...leftOut.map(
      ({ level, rows, holes }) => `${level} is left out: ${rows} rows in ${holes} holes.`,
    ),
    ...weak.map(
      ({ name, agreement }) =>
        `Kappa of ${name} is ${(agreement.kappa ?? 0).toFixed(2)}, below ${MISLOGGING_RULES.kappa}: the codes are not chemical units here, and nothing is flagged.`,
    ),
  ];
  const classes = kept.map((code) => logged.levels[code]!);
  const all = validated.map(({ probabilities }) => probabilities);
  const flags =
    weak.length > 0 ? [] : flaggedRuns(intervals, logged, { classOf, classes, probabilities: all });
  return { classes, leftOut, folds: validated[0]?.folds ?? 0, reports, flags, notes };
}

function classesOf({ levels, codes }: Category, holeStarts: Int32Array) {
  const rows = new Int32Array(levels.length);
  const holes = levels.map(() => new Set<number>());
  for (let hole = 0; hole + 1 < holeStarts.length; hole++) {
    for (let row = holeStarts[hole]!; row < holeStarts[hole + 1]!; row++) {
      const code = codes[row]!;
      if (code === NOT_LOGGED) continue;
      rows[code]! += 1;
      holes[code]?.add(hole);
    }
  }
  const isEnough = (code: number) =>
    rows[code]! >= MISLOGGING_RULES.rows && (holes[code]?.size ?? 0) >= MISLOGGING_RULES.holes;
  const all = [...levels.keys()];
  return {
    kept: all.filter(isEnough),
    leftOut: all
      .filter((code) => rows[code]! > 0 && !isEnough(code))
      .map((code) => ({ level: levels[code]!, rows: rows[code]!, holes: holes[code]?.size ?? 0 })),
  };
}

/** Logged against likeliest class, in rows and metres. */
function confusion(
  probabilities: Float64Array,
  classOf: Int32Array,
  k: number,
  lengths: Float64Array,
) {
  const [counts, metres] = [new Float64Array(k * k), new Float64Array(k * k)];
  classOf.forEach((own, row) => {
    if (own < 0 || Number.isNaN(probabilities[row * k])) return;
    let likeliest = 0;
    for (let c = 1; c < k; c++)
      if (probabilities[row * k + c]! > probabilities[row * k + likeliest]!) likeliest = c;
    counts[own * k + likeliest]! += 1;
    metres[own * k + likeliest]! += lengths[row]!;
  });
  return { counts, metres };
}
