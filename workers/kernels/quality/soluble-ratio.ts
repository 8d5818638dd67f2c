import { KernelError } from '#kernels/kernel-error.ts';

/** Soluble over total of one element, row by row. */
export interface SolubleRatio {
  /** Soluble / total as found; NaN where either is missing or the total is too small. */
  ratio: Float64Array;
  /** 0 none, then 1 up to .2, 2 up to .5, 3 up to .8, 4 above. */
  classes: Uint8Array;
  /** 1 where more dissolved than there is, beyond what the assays allow: an error, no class. */
  isError: Uint8Array;
  /** Largest ratio the precision of the assays allows. */
  errorLimit: number;
  nUsed: number;
  nMissing: number;
  /** Rows whose total is under ten detection limits. */
  nNearLimit: number;
  nErrors: number;
}

/** Upper ends of the classes of the ratio. */
export const SOLUBLE_CLASSES = [0.2, 0.5, 0.8] as const;
const LIMITS_FOR_RATIO = 10;
const UNKNOWN_ERROR_LIMIT = 1.05;

/**
 * Soluble share of an element: acid-soluble or cyanide-soluble over total. A missing soluble value
 * stays missing, it is not 0. Ratios between 1 and the error limit count as 1 for classes only.
 *
 * @param total, soluble One unit, NaN where missing, otherwise >= 0. Not modified.
 * @param options.limit Detection limit of the total, same unit.
 * @param options.cvAverage Average coefficient of variation of duplicates as a fraction; the error
 *   limit is then 1 + 2 cv, otherwise 1.05.
 * @throws {KernelError} `shape`; `bad-parameter` for the options; `not-positive` with { row } at a
 *   negative or infinite value.
 */
export function solubleRatio(
  total: Float64Array,
  soluble: Float64Array,
  options: { limit: number; cvAverage?: number },
): SolubleRatio {
  const { limit, cvAverage } = options;
  if (total.length !== soluble.length) {
    throw new KernelError(
      'shape',
      `expected ${total.length} soluble values, found ${soluble.length}`,
    );
  }
  if (!(limit >= 0 && limit < Infinity) || !(cvAverage === undefined || cvAverage >= 0)) {
    const message = `expected a limit and an error >= 0, found ${limit}, ${cvAverage}`;
    throw new KernelError('bad-parameter', message);
  }
  const errorLimit = cvAverage === undefined ? UNKNOWN_ERROR_LIMIT : 1 + 2 * cvAverage;
  const ratio = new Float64Array(total.length).fill(NaN);
  const classes = new Uint8Array(total.length);
  const isError = new Uint8Array(total.length);
  const counts = { nUsed: 0, nMissing: 0, nNearLimit: 0, nErrors: 0 };
  for (let row = 0; row < total.length; row++) {
    const [whole, part] = [total[row]!, soluble[row]!];
    requireGrades(whole, part, row);
    if (Number.isNaN(whole) || Number.isNaN(part)) counts.nMissing++;
    else if (!(whole > 0) || whole < LIMITS_FOR_RATIO * limit) counts.nNearLimit++;
    else {
      counts.nUsed++;
      ratio[row] = part / whole;
      // A ratio at the limit itself is allowed, rounding aside.
      isError[row] = ratio[row]! > errorLimit * (1 + 1e-12) ? 1 : 0;
      counts.nErrors += isError[row]!;
      if (isError[row] === 0) classes[row] = classOf(ratio[row]!);
    }
  }
  return { ratio, classes, isError, errorLimit, ...counts };
}

function classOf(ratio: number): number {
  const at = SOLUBLE_CLASSES.findIndex((end) => ratio <= end);
  return at < 0 ? SOLUBLE_CLASSES.length + 1 : at + 1;
}

function requireGrades(total: number, soluble: number, row: number): void {
  if (![total, soluble].some((value) => value < 0 || value === Infinity)) return;
  const message = `expected values >= 0, found ${total} and ${soluble} at row ${row}`;
  throw new KernelError('not-positive', message, { row });
}

/**
 * Logit of a ratio, ln(r / (1 - r)), for use as a continuous variable; ratios are kept `margin` away
 * from 0 and 1, where it has no value.
 *
 * @throws {KernelError} `bad-parameter` for a margin outside (0, .5).
 */
export function logitOfRatio(ratio: Float64Array, margin = 0.01): Float64Array {
  if (!(margin > 0 && margin < 0.5)) {
    throw new KernelError('bad-parameter', `expected a margin in (0, .5), found ${margin}`);
  }
  return ratio.map((value) => {
    const inside = Math.min(Math.max(value, margin), 1 - margin);
    return Math.log(inside / (1 - inside));
  });
}
