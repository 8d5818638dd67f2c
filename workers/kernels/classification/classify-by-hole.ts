import { KernelError } from '#kernels/kernel-error.ts';
import { agreementOf, type Agreement } from '#kernels/logging/confusion.ts';
import { crossValidate, type FitClassifier } from '#kernels/logging/cross-validate.ts';
import { checkCategory, NOT_LOGGED, type Category } from '#kernels/tables/category.ts';

/** Input of `classifyByHole`. */
export interface ClassifyByHoleInput {
  classifier: FitClassifier;
  /** Logged code of each interval, or NOT_LOGGED (neither trained on nor scored). */
  logged: Category;
  /** First row of each hole, then n. */
  holeStarts: Int32Array;
  /** Interval lengths, m. */
  lengthM: Float64Array;
  seed: number;
  onProgress?: ((share: number) => void) | undefined;
}

/** How one code is recognised. */
export interface CodeRecall {
  level: string;
  /** Scored rows and metres logged with the code. */
  rows: number;
  metres: number;
  /** Share of them given back; null without scored rows. */
  recall: number | null;
  recallByMetres: number | null;
  /** Share of the rows given the code that are logged with it; null when it is never given. */
  precision: number | null;
}

/** The log against chemistry that never saw the hole. */
export interface ClassifiedByHole {
  levels: string[];
  /** Row-major (levels, levels), logged by row, given by column: intervals and metres. */
  counts: Float64Array;
  metres: Float64Array;
  /** Of the counts. */
  agreement: Agreement;
  recalls: CodeRecall[];
  /** Likeliest level of each row and its probability; -1 and NaN where not scored. */
  given: Int32Array;
  probability: Float64Array;
  /** Logged rows that could not be scored: code absent from the other holes, or a missing coordinate. */
  nUnscored: number;
  folds: number;
}

/**
 * Gives every logged interval the code its chemistry suggests, by a classifier trained on other holes
 * only, and tabulates it against the log.
 *
 * @throws {KernelError} `shape`; `bad-parameter`; `too-few-groups` when no fold leaves two codes;
 *   `too-few-rows` when no row could be scored; those of the classifier.
 */
export function classifyByHole(input: ClassifyByHoleInput): ClassifiedByHole {
  const { classifier, logged, holeStarts, lengthM, seed, onProgress } = input;
  const n = lengthM.length;
  checkCategory(logged, n, 'logging');
  const row = lengthM.findIndex((length) => !(length > 0 && length < Infinity));
  if (row >= 0)
    throw new KernelError(
      'bad-parameter',
      `expected a length > 0 m, found ${lengthM[row]} in row ${row}`,
      { row },
    );
  const k = logged.levels.length;
  const classOf = logged.codes.map((code) => (code === NOT_LOGGED ? -1 : code));
  const options = onProgress ? { seed, onProgress } : { seed };
  const { probabilities, nUnscored, folds } = crossValidate(
    classifier,
    classOf,
    k,
    holeStarts,
    options,
  );
  const given = new Int32Array(n).fill(-1);
  const probability = new Float64Array(n).fill(NaN);
  const [counts, metres] = [new Float64Array(k * k), new Float64Array(k * k)];
  for (let i = 0; i < n; i++) {
    const shares = probabilities.subarray(i * k, (i + 1) * k);
    if (classOf[i]! < 0 || Number.isNaN(shares[0]!)) continue;
    probability[i] = shares.reduce((most, share) => Math.max(most, share), 0);
    given[i] = shares.indexOf(probability[i]!);
    counts[classOf[i]! * k + given[i]!]! += 1;
    metres[classOf[i]! * k + given[i]!]! += lengthM[i]!;
  }
  const recalls = logged.levels.map((level, c) => recallOf(level, c, k, counts, metres));
  return {
    levels: [...logged.levels],
    counts,
    metres,
    agreement: agreementOf(counts, k),
    recalls,
    given,
    probability,
    nUnscored,
    folds,
  };
}

function recallOf(
  level: string,
  c: number,
  k: number,
  counts: Float64Array,
  metres: Float64Array,
): CodeRecall {
  const ofRow = (table: Float64Array) =>
    table.subarray(c * k, (c + 1) * k).reduce((sum, value) => sum + value, 0);
  const share = (table: Float64Array, total: number) =>
    total > 0 ? table[c * k + c]! / total : null;
  let answered = 0;
  for (let r = 0; r < k; r++) answered += counts[r * k + c]!;
  const [rows, length] = [ofRow(counts), ofRow(metres)];
  return {
    level,
    rows,
    metres: length,
    recall: share(counts, rows),
    recallByMetres: share(metres, length),
    precision: share(counts, answered),
  };
}
