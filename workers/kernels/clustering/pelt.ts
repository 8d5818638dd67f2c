/** Segments of one series. */
export interface Segmentation {
  /** One past the last row of each segment, ascending; the last is n. */
  ends: number[];
  /** Cost of the segments plus the penalty per change. */
  objective: number;
}

/**
 * Exact change points of a mean in several columns: F(t) = min over s of F(s) + C(s, t) + penalty,
 * C the squared distances to the mean of rows s..t-1, with pruning: a start that can no longer win is
 * dropped, `minLength` rows later (at once would miss optima when minLength > 1).
 *
 * @param points Row-major, shape (n, p), best centred.
 * @see Killick, Fearnhead & Eckley (2012), JASA 107, Optimal detection of changepoints with a linear
 *   computational cost.
 */
export function pelt(
  points: Float64Array,
  n: number,
  p: number,
  penalty: number,
  minLength: number,
): Segmentation {
  const cost = segmentCost(points, n, p);
  if (n < 2 * minLength) return { ends: [n], objective: cost(0, n) };
  const best = new Float64Array(n + 1).fill(Infinity);
  const before = new Int32Array(n + 1);
  best[0] = -penalty;
  let starts: { s: number; dropAt: number }[] = [];
  for (let t = minLength; t <= n; t++) {
    const s = t - minLength;
    if (s === 0 || s >= minLength) starts.push({ s, dropAt: Infinity });
    starts = starts.filter((start) => start.dropAt > t);
    for (const start of starts) {
      const value = best[start.s]! + cost(start.s, t) + penalty;
      if (value >= best[t]!) continue;
      best[t] = value;
      before[t] = start.s;
    }
    for (const start of starts)
      if (start.dropAt === Infinity && best[start.s]! + cost(start.s, t) >= best[t]!)
        start.dropAt = t + minLength;
  }
  const ends: number[] = [];
  for (let t = n; t > 0; t = before[t]!) ends.unshift(t);
  return { ends, objective: best[n]! };
}

/** Squared distances of rows s..t-1 to their mean, from running sums. */
function segmentCost(points: Float64Array, n: number, p: number): (s: number, t: number) => number {
  const sums = new Float64Array((n + 1) * p);
  const squares = new Float64Array(n + 1);
  for (let i = 0; i < n; i++) {
    squares[i + 1] = squares[i]!;
    for (let j = 0; j < p; j++) {
      const value = points[i * p + j]!;
      sums[(i + 1) * p + j] = sums[i * p + j]! + value;
      squares[i + 1]! += value * value;
    }
  }
  return (s, t) => {
    let between = 0;
    for (let j = 0; j < p; j++) between += (sums[t * p + j]! - sums[s * p + j]!) ** 2;
    return Math.max(0, squares[t]! - squares[s]! - between / (t - s));
  };
}
