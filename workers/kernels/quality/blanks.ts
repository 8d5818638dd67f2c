import { KernelError } from '#kernels/kernel-error.ts';
import { rankCorrelation } from '#kernels/statistics/rank-correlation.ts';

/** Blanks read against their limit and the samples before them. */
export interface BlankReading {
  /** 1 where a blank is above the limit. */
  isFailed: Uint8Array;
  nUsed: number;
  nMissing: number;
  nFailed: number;
  /** Spearman correlation of blanks with the sample before; null under ten pairs or when constant. */
  carryOver: number | null;
  /** The correlation is above .5: grade may be carried from one sample to the next. */
  hasCarryOver: boolean;
}

const FEWEST_FOR_CARRY_OVER = 10;
const CARRY_OVER = 0.5;

/**
 * Value a blank must not pass: the larger of five detection limits and 1 % of the median ore grade
 * (common practice, from memory).
 *
 * @param detectionLimit, medianOreGrade One unit, >= 0 and not both 0.
 * @throws {KernelError} `bad-parameter`.
 */
export function blankLimit(
  detectionLimit: number,
  medianOreGrade: number,
  { limits = 5, oreShare = 0.01 }: { limits?: number; oreShare?: number } = {},
): number {
  const limit = Math.max(limits * detectionLimit, oreShare * medianOreGrade);
  if (!(detectionLimit >= 0 && medianOreGrade >= 0 && limit > 0 && limit < Infinity)) {
    const message = `expected a detection limit and an ore grade >= 0, found ${detectionLimit} and ${medianOreGrade}`;
    throw new KernelError('bad-parameter', message);
  }
  return limit;
}

/**
 * Blanks above a limit, and grade carried over from the sample prepared before each.
 *
 * @param blanks One unit, NaN where missing; below detection at any value up to the limit.
 * @param before Value of the sample before each blank, NaN where missing. Not modified.
 * @throws {KernelError} `shape`; `bad-parameter` for the limit; `not-finite` with { row };
 *   `too-few-rows` without a blank.
 */
export function readBlanks(
  blanks: Float64Array,
  before: Float64Array,
  limit: number,
): BlankReading {
  if (before.length !== blanks.length) {
    const message = `expected ${blanks.length} samples before, found ${before.length}`;
    throw new KernelError('shape', message);
  }
  if (!(limit > 0 && limit < Infinity)) {
    throw new KernelError('bad-parameter', `expected a limit > 0, found ${limit}`);
  }
  const row = blanks.findIndex((value, i) =>
    [value, before[i]!].some((x) => Math.abs(x) === Infinity),
  );
  if (row >= 0)
    throw new KernelError('not-finite', `expected finite values at row ${row}`, { row });
  const used = Array.from(blanks.keys()).filter((i) => !Number.isNaN(blanks[i]));
  if (used.length === 0) throw new KernelError('too-few-rows', 'expected a blank, found none');
  const isFailed = Uint8Array.from(blanks, (value) => (value > limit ? 1 : 0));
  const paired = used.filter((i) => !Number.isNaN(before[i]));
  const carryOver =
    paired.length < FEWEST_FOR_CARRY_OVER
      ? null
      : rankCorrelation(
          Float64Array.from(paired, (i) => blanks[i]!),
          Float64Array.from(paired, (i) => before[i]!),
        );
  return {
    isFailed,
    nUsed: used.length,
    nMissing: blanks.length - used.length,
    nFailed: isFailed.reduce((sum, value) => sum + value, 0),
    carryOver,
    hasCarryOver: carryOver !== null && carryOver > CARRY_OVER,
  };
}

/**
 * Marks every sample of a batch in which a control failed. The mark never removes a value.
 *
 * @param controlBatches, failed Batch of each control, and 1 where it failed.
 * @param sampleBatches Batch of each sample.
 * @returns 1 per sample of such a batch.
 * @throws {KernelError} `shape`.
 */
export function markFailedBatches(
  controlBatches: readonly string[],
  failed: Uint8Array,
  sampleBatches: readonly string[],
): Uint8Array {
  if (controlBatches.length !== failed.length) {
    const message = `expected ${controlBatches.length} results of controls, found ${failed.length}`;
    throw new KernelError('shape', message);
  }
  const bad = new Set(controlBatches.filter((_, i) => failed[i] !== 0));
  return Uint8Array.from(sampleBatches, (batch) => (bad.has(batch) ? 1 : 0));
}
