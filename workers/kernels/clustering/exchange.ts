import { f64Bytes, withLab } from '#kernels/dense/lab.ts';
import { squaredDistance } from '#kernels/dense/squared-distance.ts';
import { evenStride, rowTableBytes, rowTableOf, unpadded } from './row-table.ts';

/** A partition to improve; labels and centres are changed in place. */
export interface ExchangeInput {
  /** Row-major, shape (n, p). */
  points: Float64Array;
  p: number;
  weights: Float64Array | null;
  /** 0-based group of each row. */
  labels: Uint8Array;
  /** Row-major, shape (k, p): means of the groups. */
  centres: Float64Array;
  /** How much nearer each row is to its own centre than to the next, at least. */
  lead: Float64Array;
  /** Passes over the rows at most. */
  maxPasses: number;
}

/**
 * Single-row exchanges: a row goes to another group whenever that lowers the inertia once both means
 * have followed it, w m / (m - w) d² out of its group against w m / (m + w) d² into another (m the
 * group's weight). Ends at an optimum at least as good as that of Lloyd's iterations. A row is passed
 * over while its lead over the next centre outweighs both factors and all moves of centres since.
 *
 * @returns How much the inertia fell.
 * @see Hartigan (1975), Clustering Algorithms, Wiley, ch. 4 (from memory).
 */
export function exchangeRows(input: ExchangeInput): number {
  const { points, p, weights, labels, centres, maxPasses } = input;
  const n = labels.length;
  const k = centres.length / p;
  const stride = evenStride(p);
  return withLab(rowTableBytes(n, p) + f64Bytes(n, n / 8, 2 * k * stride, k, k), (lab) => {
    const rows = rowTableOf(lab, points, p, weights);
    const groups = {
      k,
      centres: rowTableOf(lab, centres, p, null).points,
      labels: lab.u8(n),
      lead: lab.f64(n),
      sums: lab.f64(0),
      mass: lab.f64(k),
      counts: lab.u32(k),
    };
    groups.labels.set(labels);
    for (let i = 0; i < n; i++) {
      groups.mass[labels[i]!]! += weights ? weights[i]! : 1;
      groups.counts[labels[i]!]! += 1;
    }
    groups.lead.set(input.lead);
    const least = lightest(groups.mass) / 2;
    const gained = lab.math.exchange(rows, groups, reachOf(points, p, weights, least), least, maxPasses);
    labels.set(groups.labels);
    centres.set(unpadded(groups.centres, p));
    return gained;
  });
}

const lightest = (mass: Float64Array): number => mass.reduce((least, m) => Math.min(least, m), Infinity);

/**
 * Lead that keeps a row in its group. With groups of mass m or more, weight w moves only where
 * d_next < d_own √((m + w) / (m - w)), and no d_own is longer than the table of rows is wide.
 */
function reachOf(points: Float64Array, p: number, weights: Float64Array | null, mass: number): number {
  const heaviest = weights ? weights.reduce((most, w) => Math.max(most, w), 0) : 1;
  if (!(mass > heaviest)) return Infinity;
  let radiusSq = 0;
  for (let i = 0; i < points.length / p; i++) radiusSq = Math.max(radiusSq, squaredDistance(points, i, points, 0, p));
  return (Math.sqrt((mass + heaviest) / (mass - heaviest)) - 1) * 2 * Math.sqrt(radiusSq);
}
