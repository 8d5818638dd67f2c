import { KernelError } from '#kernels/kernel-error.ts';
import { holeFolds } from './hole-folds.ts';

/**
 * A classifier: fits on some rows and answers for others. Whatever is fitted (limits, components,
 * means) has to be fitted on the training rows alone, each time anew.
 *
 * @param rows Training rows.
 * @param classOf Class of each of them, 0..nClasses-1; every class occurs.
 */
export type FitClassifier = (
  rows: Int32Array,
  classOf: Int32Array,
  nClasses: number,
) => PredictClasses;

/** @returns Row-major (rows, classes) probabilities; a row of NaN where a row cannot be scored. */
export type PredictClasses = (rows: Int32Array) => Float64Array;

/** What classifiers that never saw a row's hole say of it. */
export interface CrossValidated {
  /** Row-major (n, classes); NaN where a row was not scored. */
  probabilities: Float64Array;
  /** Rows with a class that could not be scored: their class is absent from the training rows. */
  nUnscored: number;
  folds: number;
}

/**
 * Cross-validation by whole holes.
 *
 * @param classOf Class of each of n rows, or -1 (neither trained on nor scored).
 * @param holeStarts First row of each hole, then n.
 * @throws {KernelError} `shape` when labels, or the classifier's answer, do not fit; `too-few-groups`
 *   when no fold leaves two classes to train on.
 */
export function crossValidate(
  fit: FitClassifier,
  classOf: Int32Array,
  nClasses: number,
  holeStarts: Int32Array,
  options: { seed: number; onProgress?: (share: number) => void },
): CrossValidated {
  const { foldOf, folds } = holeFolds(holeStarts, options.seed);
  if (classOf.length !== foldOf.length)
    throw new KernelError('shape', `expected ${foldOf.length} classes, found ${classOf.length}`);
  const probabilities = new Float64Array(classOf.length * nClasses).fill(NaN);
  const rows = [...classOf.keys()].filter((row) => classOf[row]! >= 0);
  let nScored = 0;
  let fitted = 0;
  for (let fold = 0; fold < folds; fold++) {
    const training = Int32Array.from(rows.filter((row) => foldOf[row] !== fold));
    const present = [...new Set(Int32Array.from(training, (row) => classOf[row]!))].sort(
      (a, b) => a - b,
    );
    const held = rows.filter((row) => foldOf[row] === fold && present.includes(classOf[row]!));
    options.onProgress?.((fold + 1) / folds);
    if (present.length < 2 || held.length === 0) continue;
    fitted += 1;
    const compact = Int32Array.from(training, (row) => present.indexOf(classOf[row]!));
    const answer = fit(training, compact, present.length)(Int32Array.from(held));
    if (answer.length !== held.length * present.length)
      throw new KernelError(
        'shape',
        `expected ${held.length} x ${present.length} probabilities, found ${answer.length}`,
      );
    held.forEach((row, i) => {
      if (Number.isNaN(answer[i * present.length])) return;
      nScored += 1;
      probabilities.fill(0, row * nClasses, (row + 1) * nClasses);
      present.forEach((code, k) => {
        probabilities[row * nClasses + code] = answer[i * present.length + k]!;
      });
    });
  }
  if (fitted === 0)
    throw new KernelError('too-few-groups', 'expected two classes outside some hole, found none');
  return { probabilities, nUnscored: rows.length - nScored, folds };
}
