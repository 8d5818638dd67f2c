/**
 * Nearest and second nearest centre of one row. `out` receives the two squared distances (infinite
 * where there is no second centre); the index of the nearest is returned, the first one on a tie.
 */
export type NearestTwo = (
  points: Float64Array,
  row: number,
  centres: Float64Array,
  out: Float64Array,
) => number;

/** Coordinates per row once padded with zeros: 4 and 8 have unrolled loops. */
export function paddedStride(p: number): number {
  if (p <= 4) return 4;
  return p <= 8 ? 8 : p;
}

/** Row-major table with zeros appended to each row; zeros change no distance. */
export function padRows(points: Float64Array, p: number, stride: number): Float64Array {
  if (stride === p) return points;
  const n = points.length / p;
  const out = new Float64Array(n * stride);
  for (let i = 0; i < n; i++) for (let j = 0; j < p; j++) out[i * stride + j] = points[i * p + j]!;
  return out;
}

/** The search for a stride of `paddedStride`. */
export function nearestTwoFor(stride: number): NearestTwo {
  if (stride === 4) return nearestOf4;
  if (stride === 8) return nearestOf8;
  return (points, row, centres, out) => nearestOfAny(points, row, centres, stride, out);
}

/** Squared distance between a row and a centre of one stride. */
export function squaredDistance(
  points: Float64Array,
  row: number,
  centres: Float64Array,
  centre: number,
  stride: number,
): number {
  let sq = 0;
  for (let j = 0, a = row * stride, b = centre * stride; j < stride; j++, a++, b++) {
    const d = points[a]! - centres[b]!;
    sq += d * d;
  }
  return sq;
}

function nearestOf4(
  points: Float64Array,
  row: number,
  centres: Float64Array,
  out: Float64Array,
): number {
  const at = row * 4;
  const x0 = points[at]!;
  const x1 = points[at + 1]!;
  const x2 = points[at + 2]!;
  const x3 = points[at + 3]!;
  let best = 0;
  let bestSq = Infinity;
  let nextSq = Infinity;
  for (let c = 0; c < centres.length; c += 4) {
    const d0 = x0 - centres[c]!;
    const d1 = x1 - centres[c + 1]!;
    const d2 = x2 - centres[c + 2]!;
    const d3 = x3 - centres[c + 3]!;
    const sq = d0 * d0 + d1 * d1 + (d2 * d2 + d3 * d3);
    if (sq < bestSq) {
      nextSq = bestSq;
      bestSq = sq;
      best = c >> 2;
    } else if (sq < nextSq) nextSq = sq;
  }
  out[0] = bestSq;
  out[1] = nextSq;
  return best;
}

function nearestOf8(
  points: Float64Array,
  row: number,
  centres: Float64Array,
  out: Float64Array,
): number {
  const at = row * 8;
  const x0 = points[at]!;
  const x1 = points[at + 1]!;
  const x2 = points[at + 2]!;
  const x3 = points[at + 3]!;
  const x4 = points[at + 4]!;
  const x5 = points[at + 5]!;
  const x6 = points[at + 6]!;
  const x7 = points[at + 7]!;
  let best = 0;
  let bestSq = Infinity;
  let nextSq = Infinity;
  for (let c = 0; c < centres.length; c += 8) {
    const d0 = x0 - centres[c]!;
    const d1 = x1 - centres[c + 1]!;
    const d2 = x2 - centres[c + 2]!;
    const d3 = x3 - centres[c + 3]!;
    const d4 = x4 - centres[c + 4]!;
    const d5 = x5 - centres[c + 5]!;
    const d6 = x6 - centres[c + 6]!;
    const d7 = x7 - centres[c + 7]!;
    const sq = d0 * d0 + d1 * d1 + (d2 * d2 + d3 * d3) + (d4 * d4 + d5 * d5 + (d6 * d6 + d7 * d7));
    if (sq < bestSq) {
      nextSq = bestSq;
      bestSq = sq;
      best = c >> 3;
    } else if (sq < nextSq) nextSq = sq;
  }
  out[0] = bestSq;
  out[1] = nextSq;
  return best;
}

function nearestOfAny(
  points: Float64Array,
  row: number,
  centres: Float64Array,
  stride: number,
  out: Float64Array,
): number {
  const k = centres.length / stride;
  let best = 0;
  let bestSq = Infinity;
  let nextSq = Infinity;
  for (let c = 0; c < k; c++) {
    const sq = squaredDistance(points, row, centres, c, stride);
    if (sq < bestSq) {
      nextSq = bestSq;
      bestSq = sq;
      best = c;
    } else if (sq < nextSq) nextSq = sq;
  }
  out[0] = bestSq;
  out[1] = nextSq;
  return best;
}
