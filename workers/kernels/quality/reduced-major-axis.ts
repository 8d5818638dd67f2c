import { median } from 'simple-statistics';
import { KernelError } from '#kernels/kernel-error.ts';
import { requirePairs } from './pairs.ts';

/** A line that treats both methods alike, with what it says about bias. */
export interface MajorAxisLine {
  n: number;
  slope: number;
  intercept: number;
  /** Product-moment correlation. */
  r: number;
  slopeSe: number;
  interceptSe: number;
  /** 1 lies outside slope +- 1.96 standard errors. */
  hasProportionalBias: boolean;
  /** 0 lies outside intercept +- 1.96 standard errors. */
  hasConstantBias: boolean;
}

export interface ReducedMajorAxis extends MajorAxisLine {
  /** The line without pairs far off it; null when no pair is. */
  withoutOutliers: MajorAxisLine | null;
  /** Rows further off the line than three robust sds. */
  outliers: number[];
  notes: string[];
}

const Z_95 = 1.959963984540054;
/** Residuals beyond this many robust sds are outliers. */
const OUTLIER_SDS = 3;
const MAD_PER_SD = 0.6744897501960817;
/** Under this correlation the slope is a ratio of spreads and no more. */
const WEAK = 0.5;

/**
 * Reduced major axis (geometric mean) regression of y on x: slope sign(r) s_y / s_x. Neither method
 * is taken as free of error.
 *
 * @param x, y The same samples by two methods, one unit, finite; at least five. Not modified.
 * @throws {KernelError} `shape`, `too-few-rows`, `not-finite`; `singular` when x or y does not vary.
 * @see Sinclair & Blackwell (2002), Applied Mineral Inventory Estimation, Cambridge (standard errors
 *   from memory).
 */
export function reducedMajorAxis(x: Float64Array, y: Float64Array): ReducedMajorAxis {
  requirePairs(x, y);
  const line = fitLine(x, y);
  const residuals = Array.from(x, (value, i) => y[i]! - line.intercept - line.slope * value);
  const middle = median(residuals);
  const sd = median(residuals.map((value) => Math.abs(value - middle))) / MAD_PER_SD;
  // Rounding noise about a perfect line has no outliers.
  const least = 1e-12 * (Math.abs(line.intercept) + Math.abs(line.slope * (x[0] ?? 0)));
  const isOff = residuals.map((value) => Math.abs(value) > Math.max(OUTLIER_SDS * sd, least));
  const outliers = Array.from(isOff.keys()).filter((row) => isOff[row]);
  const notes: string[] = [];
  if (Math.abs(line.r) < WEAK) {
    notes.push(`the methods hardly agree (r ${line.r.toFixed(2)}): the slope means little`);
  }
  return { ...line, withoutOutliers: refit(x, y, isOff, notes), outliers, notes };
}

function refit(
  x: Float64Array,
  y: Float64Array,
  isOff: readonly boolean[],
  notes: string[],
): MajorAxisLine | null {
  if (!isOff.includes(true)) return null;
  const [keptX, keptY] = [x, y].map((side) => side.filter((_, row) => !isOff[row]));
  try {
    requirePairs(keptX!, keptY!);
    return fitLine(keptX!, keptY!);
  } catch (error) {
    if (!(error instanceof KernelError)) throw error;
    notes.push('too little is left without the outliers for a line of its own');
    return null;
  }
}

function fitLine(x: Float64Array, y: Float64Array): MajorAxisLine {
  const n = x.length;
  const meanX = x.reduce((sum, value) => sum + value, 0) / n;
  const meanY = y.reduce((sum, value) => sum + value, 0) / n;
  let [xx, yy, xy] = [0, 0, 0];
  for (let i = 0; i < n; i++) {
    const [dx, dy] = [x[i]! - meanX, y[i]! - meanY];
    xx += dx * dx;
    yy += dy * dy;
    xy += dx * dy;
  }
  const isFlat = (squares: number, mean: number) => !(squares > n * (1e-12 * mean) ** 2);
  if (isFlat(xx, meanX) || isFlat(yy, meanY)) {
    throw new KernelError('singular', 'expected values that vary on both sides');
  }
  const r = Math.max(-1, Math.min(1, xy / Math.sqrt(xx * yy)));
  const slope = (r < 0 ? -1 : 1) * Math.sqrt(yy / xx);
  const intercept = meanY - slope * meanX;
  const slopeSe = Math.abs(slope) * Math.sqrt((1 - r * r) / n);
  const sdY = Math.sqrt(yy / (n - 1));
  const relative = (meanX * meanX * (n - 1)) / xx;
  const interceptSe = sdY * Math.sqrt(((1 - r) / n) * (2 + relative * (1 + r)));
  return {
    n,
    slope,
    intercept,
    r,
    slopeSe,
    interceptSe,
    hasProportionalBias: Math.abs(slope - 1) > Z_95 * slopeSe + 1e-12,
    hasConstantBias: Math.abs(intercept) > Z_95 * interceptSe + 1e-12 * Math.abs(meanY),
  };
}
