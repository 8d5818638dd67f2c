import { KernelError } from '#kernels/kernel-error.ts';
import { normalCdf, normalQuantile } from '#kernels/normal.ts';
import type { Partition } from './inflection.ts';
import type { MixtureData } from './mixture-data.ts';

/** One point of a log-probability plot. */
export interface PlotPoint {
  /** Normal score. */
  z: number;
  /** ln grade. */
  y: number;
}

/** What is drawn to check a partition by eye. */
export interface PartitionPlot {
  /** Rows of the upper population on its own scale: exceedance over its share. */
  upper: PlotPoint[];
  /** Rows of the lower population on its own scale: cumulative share over its share. */
  lower: PlotPoint[];
  /** The curve that both lines give when put together again. */
  recombined: PlotPoint[];
}

/**
 * Points of the two partitioned populations and of their recombination. A row is a point of a
 * population as long as that population's own share of it lies between 0 and 1.
 *
 * @param data ln grades from `mixtureData`, those the partition was made on.
 * @param partition From `partitionAt`.
 * @param limit Most points of each list, taken at equal steps of rank; at least 2.
 * @throws {KernelError} `bad-parameter` for a limit below 2.
 * @see Sinclair (1976), Applications of Probability Graphs in Mineral Exploration (from memory).
 */
export function partitionPlot(data: MixtureData, partition: Partition, limit = 400): PartitionPlot {
  if (!(limit >= 2))
    throw new KernelError('bad-parameter', `expected at least 2 points, found ${limit}`);
  const { lower, upper } = partition;
  const plot: PartitionPlot = { upper: [], lower: [], recombined: [] };
  let running = data.belowWeight.reduce((sum, w) => sum + w, 0);
  const total = data.weight.reduce((sum, w) => sum + w, running);
  for (let i = 0; i < data.y.length; i++) {
    const y = data.y[i]!;
    const p = (running + data.weight[i]! / 2) / total;
    running += data.weight[i]!;
    addPoint(plot.upper, y, 1 - (1 - p) / upper.share);
    addPoint(plot.lower, y, p / lower.share);
    const both = [lower, upper].reduce(
      (sum, c) => sum + c.share * normalCdf((y - c.mean) / c.sd),
      0,
    );
    addPoint(plot.recombined, y, both);
  }
  return {
    upper: thinned(plot.upper, limit),
    lower: thinned(plot.lower, limit),
    recombined: thinned(plot.recombined, limit),
  };
}

function addPoint(points: PlotPoint[], y: number, share: number): void {
  if (share > 0 && share < 1) points.push({ z: normalQuantile(share), y });
}

/** First, last and points at equal steps of rank between. */
function thinned(points: PlotPoint[], limit: number): PlotPoint[] {
  if (points.length <= limit) return points;
  const step = (points.length - 1) / (limit - 1);
  return Array.from({ length: limit }, (_, i) => points[Math.round(i * step)]!);
}

/** Where a grade falls between two populations. */
export type PopulationZone = 'lower' | 'overlap' | 'upper';

/**
 * Zone of a grade by a partition: on either side of its threshold, or, where the populations overlap,
 * below 1 % of the upper, above 99 % of the lower, or between.
 *
 * @param y ln grade.
 * @throws {KernelError} `not-finite` for NaN (minus infinity, a grade of 0, is `lower`).
 */
export function zoneOf({ lower99, upper1, threshold }: Partition, y: number): PopulationZone {
  if (Number.isNaN(y)) throw new KernelError('not-finite', 'expected a ln grade, found NaN');
  if (threshold !== null) return y < threshold ? 'lower' : 'upper';
  if (y < Math.min(upper1, lower99)) return 'lower';
  return y > Math.max(upper1, lower99) ? 'upper' : 'overlap';
}
