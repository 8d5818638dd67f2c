import { KernelError } from '#kernels/kernel-error.ts';
import { rankCorrelation } from '#kernels/statistics/rank-correlation.ts';
import { checkHoleStarts, holeShiftTest } from '#kernels/tables/hole-shift.ts';
import { midranks } from '#kernels/tables/ranks.ts';
import { studentTwoSided } from '#kernels/tables/special-functions.ts';

/** Mean grade of samples whose core recovery lies in a range. */
export interface RecoveryBin {
  /** From this recovery, %, up to but without the next. */
  from: number;
  to: number;
  n: number;
  meanGrade: number | null;
}

/** Whether grade changes with core recovery: lost core may be lost grade. */
export interface RecoveryReading {
  n: number;
  /** Spearman correlation; null when one side does not vary. */
  rho: number | null;
  t: number | null;
  /** For independent rows: nominal, since samples down a hole are alike. */
  nominalP: number | null;
  /** By shifting recovery round within each hole. */
  shiftedP: number | null;
  bins: RecoveryBin[];
  /** 100 (mean grade under 80 % recovery / mean grade of the rest - 1), %; null without either. */
  lowRecoveryDifference: number | null;
  /** Null under twenty rows: no verdict. */
  isFlagged: boolean | null;
  /** Rows with a recovery above 105 %: an error of the log, left out. */
  errorRows: number[];
  nMissing: number;
  sentence: string;
}

/** Ends of the recovery bins, %; the last takes everything up to the error limit. */
const BIN_ENDS = [0, 50, 70, 80, 90, 95];
const ERROR_RECOVERY = 105;
const LOW_RECOVERY = 80;
const FEWEST_FOR_VERDICT = 20;
/** This project's choice, but for the usual p. */
export const RECOVERY_LIMITS = { rho: 0.2, nominalP: 0.01, differencePercent: 20 } as const;

/**
 * Grade against core recovery within one domain.
 *
 * @param recovery %, NaN where missing, otherwise >= 0. Not modified.
 * @param grade Same rows, one unit, NaN where missing. Not modified.
 * @param holeStarts First row of each hole, then the number of rows; rows in order down each hole.
 * @throws {KernelError} `shape`; `not-finite` with { row }; `bad-parameter` with { row } at a
 *   negative recovery; `too-few-rows` under three rows.
 */
export function recoveryAgainstGrade(
  recovery: Float64Array,
  grade: Float64Array,
  holeStarts: Int32Array,
  options: { seed: number; draws?: number; onProgress?: (share: number) => void },
): RecoveryReading {
  const { rows, errorRows, nMissing } = usableRows(recovery, grade);
  const x = Float64Array.from(rows, (row) => recovery[row]!);
  const y = Float64Array.from(rows, (row) => grade[row]!);
  const starts = startsOfUsed(holeStarts, rows, recovery.length);
  const test = spearmanTest(x, y);
  const shiftedP = test === null ? null : shiftTest(x, y, starts, options);
  const bins = binMeans(x, y);
  const difference = lowRecoveryDifference(x, y);
  const isFlagged =
    rows.length < FEWEST_FOR_VERDICT
      ? null
      : (test !== null &&
          Math.abs(test.rho) > RECOVERY_LIMITS.rho &&
          test.nominalP < RECOVERY_LIMITS.nominalP) ||
        (difference !== null && Math.abs(difference) > RECOVERY_LIMITS.differencePercent);
  return {
    n: rows.length,
    rho: test?.rho ?? null,
    t: test?.t ?? null,
    nominalP: test?.nominalP ?? null,
    shiftedP,
    bins,
    lowRecoveryDifference: difference,
    isFlagged,
    errorRows,
    nMissing,
    sentence: sentenceOf(isFlagged, test?.rho ?? null, rows.length),
  };
}

/**
 * Spearman's correlation with its Student t and two-sided p on n - 2 degrees of freedom.
 *
 * @returns Null when a side does not vary; t null (and p 0) when one order repeats the other.
 * @throws {KernelError} As rankCorrelation.
 */
export function spearmanTest(
  x: Float64Array,
  y: Float64Array,
): { rho: number; t: number | null; nominalP: number } | null {
  const rho = rankCorrelation(x, y);
  if (rho === null) return null;
  const left = 1 - rho * rho;
  if (!(left > 0)) return { rho, t: null, nominalP: 0 };
  const t = rho * Math.sqrt((x.length - 2) / left);
  return { rho, t, nominalP: studentTwoSided(t, x.length - 2) };
}

function shiftTest(
  x: Float64Array,
  y: Float64Array,
  starts: Int32Array,
  options: { seed: number; draws?: number; onProgress?: (share: number) => void },
): number {
  // A shift moves ranks with their values, so that ranking once is enough.
  const [a, b] = [midranks(x).ranks, midranks(y).ranks];
  const middle = (x.length + 1) / 2;
  const statistics = (source: Int32Array) => {
    let sum = 0;
    for (let i = 0; i < source.length; i++) sum += (a[source[i]!]! - middle) * (b[i]! - middle);
    return Float64Array.of(Math.abs(sum));
  };
  return holeShiftTest(starts, statistics, options).p[0]!;
}

/** Hole starts among the rows used; holes without one fall away. */
function startsOfUsed(holeStarts: Int32Array, rows: Uint32Array, nRows: number): Int32Array {
  const n = checkHoleStarts(holeStarts);
  if (n !== nRows) {
    throw new KernelError('shape', `expected hole starts up to ${nRows}, found ${n}`);
  }
  let used = 0;
  const starts = holeStarts.map((start) => {
    while (used < rows.length && rows[used]! < start) used++;
    return used;
  });
  return starts.filter((start, i) => i === 0 || start > starts[i - 1]!);
}

function usableRows(recovery: Float64Array, grade: Float64Array) {
  if (recovery.length !== grade.length) {
    throw new KernelError('shape', `expected ${recovery.length} grades, found ${grade.length}`);
  }
  const errorRows: number[] = [];
  const rows: number[] = [];
  for (let row = 0; row < grade.length; row++) {
    const [percent, value] = [recovery[row]!, grade[row]!];
    if (percent < 0) {
      const message = `expected a recovery >= 0, found ${percent} at row ${row}`;
      throw new KernelError('bad-parameter', message, { row });
    }
    if (Math.abs(value) === Infinity || percent === Infinity) {
      throw new KernelError('not-finite', `expected finite values at row ${row}`, { row });
    }
    if (percent > ERROR_RECOVERY) errorRows.push(row);
    else if (!Number.isNaN(percent) && !Number.isNaN(value)) rows.push(row);
  }
  const nMissing = grade.length - rows.length - errorRows.length;
  return { rows: Uint32Array.from(rows), errorRows, nMissing };
}

function binMeans(recovery: Float64Array, grade: Float64Array): RecoveryBin[] {
  return BIN_ENDS.map((from, bin) => {
    const to = BIN_ENDS[bin + 1] ?? ERROR_RECOVERY;
    const isLast = bin === BIN_ENDS.length - 1;
    const inside = grade.filter(
      (_, i) => recovery[i]! >= from && (recovery[i]! < to || (isLast && recovery[i]! <= to)),
    );
    return { from, to, n: inside.length, meanGrade: meanOf(inside) };
  });
}

function lowRecoveryDifference(recovery: Float64Array, grade: Float64Array): number | null {
  const low = meanOf(grade.filter((_, i) => recovery[i]! < LOW_RECOVERY));
  const rest = meanOf(grade.filter((_, i) => recovery[i]! >= LOW_RECOVERY));
  return low === null || rest === null || !(rest > 0) ? null : 100 * (low / rest - 1);
}

function meanOf(values: Float64Array): number | null {
  return values.length === 0 ? null : values.reduce((a, b) => a + b, 0) / values.length;
}

function sentenceOf(isFlagged: boolean | null, rho: number | null, n: number): string {
  const found = rho === null ? 'recovery or grade does not vary' : `Spearman ${rho.toFixed(2)}`;
  if (isFlagged === null) return `${n} samples are too few for a verdict; ${found}.`;
  return isFlagged
    ? `Grade changes with recovery (${found}): lost core may bias the grade.`
    : `Grade does not clearly change with recovery (${found}).`;
}
