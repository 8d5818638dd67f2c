import {
  nearestTwoFor,
  padRows,
  paddedStride,
  squaredDistance,
  type NearestTwo,
} from './nearest-centre.ts';
import type { OnProgress } from './points.ts';

/** Where Lloyd's iterations start and when they stop. */
export interface LloydInput {
  /** Row-major, shape (n, p), finite. */
  points: Float64Array;
  p: number;
  /** Row-major, shape (k, p), k < 255; not modified. */
  centres: Float64Array;
  /** One weight > 0 per row, or null for equal weights. */
  weights: Float64Array | null;
  maxIterations: number;
  /** Stop when no centre moves farther than this, in the unit of the coordinates. */
  minMove: number;
  onProgress?: OnProgress | undefined;
}

/** A partition and its centres. */
export interface LloydResult {
  /** Nearest centre of each row, 0-based. */
  labels: Uint8Array;
  /** Row-major, shape (k, p): weighted mean of each group's rows. */
  centres: Float64Array;
  /** Weighted sum of squared distances to the own centre. */
  inertia: number;
  iterations: number;
  converged: boolean;
}

/** No label yet. */
const NONE = 255;

interface State {
  readonly points: Float64Array;
  readonly weights: Float64Array | null;
  readonly n: number;
  readonly stride: number;
  readonly k: number;
  readonly nearest: NearestTwo;
  readonly centres: Float64Array;
  readonly labels: Uint8Array;
  readonly sums: Float64Array;
  readonly mass: Float64Array;
  /** Rows of each label. */
  readonly counts: Uint32Array;
  /** A row's distance to the next centre less that to its own, plus `slack`, when last measured. */
  readonly lead: Float64Array;
  /** Per label: the lead its rows may have lost since the start. */
  readonly slack: Float64Array;
}

/**
 * Lloyd's iterations, exact: assign each row to its nearest centre, move each centre to the weighted
 * mean of its rows, repeat. A row is measured again only when the centres may have moved farther than
 * its lead over the next centre (triangle inequality), which skips most rows after a few rounds.
 * A centre left without rows is put on the row farthest from its own centre.
 *
 * @see Lloyd (1982), IEEE Trans. Inf. Theory 28; Hamerly (2010), SIAM Data Mining, for bounds of
 *   this kind (both from memory).
 */
export function lloyd(input: LloydInput): LloydResult {
  const { p, maxIterations, minMove, onProgress } = input;
  const state = startState(input);
  let converged = false;
  let iterations = 0;
  while (!converged && iterations < maxIterations) {
    const changed = assign(state);
    const reseeded = reseedEmpty(state);
    const largestMove = moveCentres(state);
    iterations += 1;
    converged = !reseeded && (changed === 0 || largestMove <= minMove);
    onProgress?.(iterations / maxIterations);
  }
  assign(state);
  reseedEmpty(state);
  const inertia = settle(state);
  return { labels: state.labels, centres: unpadded(state, p), inertia, iterations, converged };
}

function startState({ points, p, centres, weights }: LloydInput): State {
  const n = points.length / p;
  const k = centres.length / p;
  const stride = paddedStride(p);
  return {
    points: padRows(points, p, stride),
    weights,
    n,
    stride,
    k,
    nearest: nearestTwoFor(stride),
    centres: padRows(centres.slice(), p, stride),
    labels: new Uint8Array(n).fill(NONE),
    sums: new Float64Array(k * stride),
    mass: new Float64Array(k),
    counts: new Uint32Array(k),
    lead: new Float64Array(n).fill(-Infinity),
    slack: new Float64Array(k),
  };
}

/** Gives rows whose label may have changed their nearest centre; returns how many did change. */
function assign(state: State): number {
  const { points, n, centres, labels, lead, slack, nearest } = state;
  const two = new Float64Array(2);
  let changed = 0;
  for (let i = 0; i < n; i++) {
    const old = labels[i]!;
    if (old !== NONE && lead[i]! > slack[old]!) continue;
    const label = nearest(points, i, centres, two);
    lead[i] = Math.sqrt(two[1]!) - Math.sqrt(two[0]!) + slack[label]!;
    if (label === old) continue;
    changed += 1;
    moveRow(state, i, old, label);
  }
  return changed;
}

/** Moves row i from one label's sums to another's. */
function moveRow(
  { points, weights, stride, sums, mass, counts, labels }: State,
  i: number,
  from: number,
  to: number,
): void {
  const w = weights ? weights[i]! : 1;
  const row = i * stride;
  if (from !== NONE) {
    mass[from]! -= w;
    counts[from]! -= 1;
    for (let j = 0; j < stride; j++) sums[from * stride + j]! -= w * points[row + j]!;
  }
  mass[to]! += w;
  counts[to]! += 1;
  for (let j = 0; j < stride; j++) sums[to * stride + j]! += w * points[row + j]!;
  labels[i] = to;
}

/** Puts each centre without rows on the farthest row of another group; true when it had to. */
function reseedEmpty(state: State): boolean {
  const { counts, stride, labels, lead } = state;
  const empty = [...counts.keys()].filter((c) => counts[c] === 0);
  for (const c of empty) {
    const row = farthestRow(state);
    if (row < 0) return false;
    state.mass[c] = 0;
    state.sums.fill(0, c * stride, (c + 1) * stride);
    moveRow(state, row, labels[row]!, c);
  }
  if (empty.length > 0) lead.fill(-Infinity);
  return empty.length > 0;
}

/** The row farthest from its own centre among groups of two rows or more; -1 when none. */
function farthestRow({ points, n, stride, centres, labels, counts }: State): number {
  let farthest = -1;
  let farthestSq = 0;
  for (let i = 0; i < n; i++) {
    if (counts[labels[i]!]! < 2) continue;
    const sq = squaredDistance(points, i, centres, labels[i]!, stride);
    if (sq <= farthestSq) continue;
    farthest = i;
    farthestSq = sq;
  }
  return farthest;
}

/** Moves centres to their means, widens the slack; returns the largest move. */
function moveCentres({ stride, k, centres, sums, mass, slack }: State): number {
  const moves = new Float64Array(k);
  for (let c = 0; c < k; c++) {
    if (!(mass[c]! > 0)) continue;
    let sq = 0;
    for (let j = c * stride; j < (c + 1) * stride; j++) {
      const next = sums[j]! / mass[c]!;
      sq += (next - centres[j]!) ** 2;
      centres[j] = next;
    }
    moves[c] = Math.sqrt(sq);
  }
  for (let c = 0; c < k; c++) {
    let farthestOther = 0;
    for (let other = 0; other < k; other++) {
      if (other !== c) farthestOther = Math.max(farthestOther, moves[other]!);
    }
    slack[c]! += moves[c]! + farthestOther;
  }
  return moves.reduce((most, move) => Math.max(most, move), 0);
}

/**
 * Means summed afresh, free of the rounding of thousands of single moves; returns the inertia. The
 * squared distances are taken to the centres as they were: moving a centre to the mean of its rows
 * lowers their sum by mass times the squared move, exactly.
 */
function settle({ points, weights, n, stride, k, centres, sums, mass, labels }: State): number {
  sums.fill(0);
  mass.fill(0);
  let inertia = 0;
  for (let i = 0; i < n; i++) {
    const w = weights ? weights[i]! : 1;
    let sq = 0;
    mass[labels[i]!]! += w;
    for (let j = 0, from = i * stride, to = labels[i]! * stride; j < stride; j++, from++, to++) {
      const x = points[from]!;
      const d = x - centres[to]!;
      sq += d * d;
      sums[to]! += w * x;
    }
    inertia += w * sq;
  }
  for (let c = 0; c < k; c++) {
    if (!(mass[c]! > 0)) continue;
    for (let j = c * stride; j < (c + 1) * stride; j++) {
      const mean = sums[j]! / mass[c]!;
      inertia -= mass[c]! * (mean - centres[j]!) ** 2;
      centres[j] = mean;
    }
  }
  return Math.max(0, inertia);
}

function unpadded({ centres, k, stride }: State, p: number): Float64Array {
  const out = new Float64Array(k * p);
  for (let c = 0; c < k; c++) for (let j = 0; j < p; j++) out[c * p + j] = centres[c * stride + j]!;
  return out;
}
