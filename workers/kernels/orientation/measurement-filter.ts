/** What is known of a structure measured on oriented core. */
export interface CoreMeasurement {
  alphaDeg: number;
  /** Dip of the hole at the reading, degrees, negative down. */
  holeDip: number;
  confidence: string;
}

/** Limits of the filter (common practice, from memory); each is shown and editable. */
export interface MeasurementLimits {
  leastAlphaDeg: number;
  steepestHoleDeg: number;
  confidences: readonly string[];
}

export const DEFAULT_LIMITS: MeasurementLimits = {
  leastAlphaDeg: 10,
  steepestHoleDeg: 85,
  confidences: ['good', 'moderate'],
};

export type LeftOutReason = 'no-angle' | 'low-alpha' | 'steep-hole' | 'low-confidence';

export interface FilteredMeasurements {
  /** Rows kept, ascending. */
  kept: Int32Array;
  /** Every row left out, with the first reason that holds, in the order of the type. */
  leftOut: { row: number; reason: LeftOutReason }[];
}

/**
 * Keeps measurements fit for orientation statistics: alpha large enough for beta to mean something,
 * a hole shallow enough to have a bottom, and a trusted orientation line.
 */
export function filterMeasurements(
  measurements: readonly CoreMeasurement[],
  limits: MeasurementLimits = DEFAULT_LIMITS,
): FilteredMeasurements {
  const kept: number[] = [];
  const leftOut: FilteredMeasurements['leftOut'] = [];
  measurements.forEach((measurement, row) => {
    const reason = reasonToLeaveOut(measurement, limits);
    if (reason === null) kept.push(row);
    else leftOut.push({ row, reason });
  });
  return { kept: Int32Array.from(kept), leftOut };
}

function reasonToLeaveOut(
  { alphaDeg, holeDip, confidence }: CoreMeasurement,
  { leastAlphaDeg, steepestHoleDeg, confidences }: MeasurementLimits,
): LeftOutReason | null {
  if (!Number.isFinite(alphaDeg) || !Number.isFinite(holeDip)) return 'no-angle';
  if (alphaDeg < leastAlphaDeg) return 'low-alpha';
  if (Math.abs(holeDip) > steepestHoleDeg) return 'steep-hole';
  return confidences.includes(confidence) ? null : 'low-confidence';
}

/** How far an orientation line is to be trusted. */
export type LineConfidence = 'good' | 'moderate' | 'poor' | 'none';

/**
 * Confidence of an orientation line from the angle by which it misses the line of the next run: up to
 * 10 degrees good, up to 20 moderate (common practice, from memory).
 *
 * @param lockAngleDeg Any turn; null or NaN where the core is not oriented or does not lock.
 */
export function lineConfidence(lockAngleDeg: number | null): LineConfidence {
  if (lockAngleDeg === null || !Number.isFinite(lockAngleDeg)) return 'none';
  const turned = Math.abs(lockAngleDeg) % 360;
  const angle = Math.min(turned, 360 - turned);
  if (angle <= 10) return 'good';
  return angle <= 20 ? 'moderate' : 'poor';
}
