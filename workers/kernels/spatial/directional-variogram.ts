import { KernelError } from '#kernels/kernel-error.ts';
import { toRadians, type Vector } from '#kernels/geometry/directions.ts';
import { checkCategory, type Category } from '#kernels/tables/category.ts';
import { requireValues } from './down-hole-variogram.ts';
import { lineDirection, requirePositions, type Positions } from './positions.ts';
import {
  addPair,
  emptyLagSums,
  variogramOf,
  type ExperimentalVariogram,
  type LagSums,
} from './variogram-lags.ts';

/** A direction to look along, degrees; plunge positive down. */
export interface VariogramDirection {
  trend: number;
  plunge: number;
  /** Half-angle of the cone, degrees, 22.5 unless told; in (0, 90]. */
  toleranceDegrees?: number;
  /** Greatest distance off the axis, m; two lags unless told. */
  bandwidthM?: number;
}

export interface DirectionalOptions {
  lagM: number;
  /** Lag classes, 20 unless told. */
  lags?: number;
  /** Null or left out: all directions. */
  direction?: VariogramDirection | null;
  /** Called with the share done after every thousand rows. */
  onProgress?: (share: number) => void;
}

/**
 * Variograms in space, one per domain: pairs of one domain, across holes too, whose separation lies
 * within the cone and the bandwidth about a direction (either way along it). A pair's class is its
 * distance over the lag, rounded: the tolerance is half a lag. Pairs at one spot are left out.
 *
 * @param positions n composites, m.
 * @param domains A domain of each, or NOT_LOGGED (left out).
 * @param values n values, usually normal scores; NaN where missing.
 * @returns In the order of the levels.
 * @throws {KernelError} `shape`; `too-few-rows`; `not-finite`; `bad-parameter`.
 * @see Journel & Huijbregts (1978), Mining Geostatistics, Academic Press (from memory).
 */
export function directionalVariograms(
  positions: Positions,
  domains: Category,
  values: Float64Array,
  options: DirectionalOptions,
): ExperimentalVariogram[] {
  const n = requirePositions(positions);
  checkCategory(domains, n, 'domain');
  requireValues(values, n);
  const { lagM, lags = 20, direction = null, onProgress } = options;
  const cone = direction === null ? null : coneOf(direction, lagM);
  const total = Math.max(1, n);
  let done = 0;
  return domains.levels.map((_, code) => {
    const rows = [...values.keys()].filter(
      (row) => domains.codes[row] === code && !Number.isNaN(values[row]),
    );
    const sums = emptyLagSums(lagM, lags);
    sumPairs(sortedAlong(positions, values, rows), { sums, lagM, cone }, (row) =>
      onProgress?.((done + row) / total),
    );
    done += rows.length;
    return variogramOf(
      sums,
      rows.map((row) => values[row]!),
    );
  });
}

interface Cone {
  axis: Vector;
  cosine: number;
  bandwidthM: number;
}

function coneOf(direction: VariogramDirection, lagM: number): Cone {
  const { trend, plunge, toleranceDegrees = 22.5, bandwidthM = 2 * lagM } = direction;
  if (!(toleranceDegrees > 0 && toleranceDegrees <= 90 && bandwidthM > 0))
    throw new KernelError(
      'bad-parameter',
      `expected a tolerance in (0, 90] degrees and a bandwidth > 0 m, found ${toleranceDegrees}, ${bandwidthM}`,
    );
  // A hair of slack keeps pairs that lie on the cone itself.
  const cosine = Math.cos(toRadians(toleranceDegrees)) - 1e-12;
  return { axis: lineDirection(trend, plunge), cosine, bandwidthM };
}

/** Rows of one domain by ascending east coordinate. */
function sortedAlong({ x, y, z }: Positions, values: Float64Array, rows: number[]) {
  const order = rows.sort((a, b) => x[a]! - x[b]! || a - b);
  const picked = (column: Float64Array) => Float64Array.from(order, (row) => column[row]!);
  return { x: picked(x), y: picked(y), z: picked(z), values: picked(values) };
}

const REPORT_ROWS = 1000;

/** Pairs within reach, found by sweeping along the east coordinate. */
function sumPairs(
  { x, y, z, values }: ReturnType<typeof sortedAlong>,
  { sums, lagM, cone }: { sums: LagSums; lagM: number; cone: Cone | null },
  onRows: (row: number) => void,
): void {
  const reachM = (sums.pairs.length + 0.5) * lagM;
  const reach2 = reachM * reachM;
  for (let i = 0; i < x.length; i++) {
    if (i % REPORT_ROWS === 0) onRows(i);
    for (let j = i + 1; j < x.length; j++) {
      const east = x[j]! - x[i]!;
      if (east > reachM) break;
      const north = y[j]! - y[i]!;
      const up = z[j]! - z[i]!;
      const square = east * east + north * north + up * up;
      if (square > reach2 || square === 0) continue;
      if (cone && !isInside(cone, east, north, up, square)) continue;
      addPair(sums, Math.sqrt(square), values[j]! - values[i]!, lagM);
    }
  }
}

function isInside(
  { axis, cosine, bandwidthM }: Cone,
  east: number,
  north: number,
  up: number,
  square: number,
): boolean {
  const along = Math.abs(east * axis[0] + north * axis[1] + up * axis[2]);
  if (along < cosine * Math.sqrt(square)) return false;
  return square - along * along <= bandwidthM * bandwidthM * (1 + 1e-12);
}
