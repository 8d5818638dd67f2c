import { copyInto, f64Bytes, withLab, type Lab } from '#kernels/dense/lab.ts';
import { NO_LABEL, type DenseMath, type RowGroups, type RowTable } from '#kernels/dense/dense-math.ts';
import { squaredDistance } from '#kernels/dense/squared-distance.ts';
import { evenStride, rowTableBytes, rowTableOf, unpadded } from './row-table.ts';
import type { OnProgress } from '#kernels/progress.ts';

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
  /** How much nearer each row is to its own centre than to the next, at least. */
  lead: Float64Array;
  /** Weighted sum of squared distances to the own centre. */
  inertia: number;
  iterations: number;
  converged: boolean;
}

interface State {
  readonly math: DenseMath;
  readonly rows: RowTable;
  readonly groups: RowGroups;
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
  const { points, p, centres, weights } = input;
  const n = points.length / p;
  return withLab(rowTableBytes(n, p) + groupBytes(n, centres.length / p, p), (lab) => {
    const result = lloydOf(lab, rowTableOf(lab, points, p, weights), {
      ...input,
      centres: rowTableOf(lab, centres, p, null).points,
    });
    return { ...result, centres: unpadded(result.centres, p) };
  });
}

/** {@link lloyd} of rows that are in a lab, with room for `groupBytes` more; centres have their stride. */
export function lloydOf(
  lab: Lab,
  rows: RowTable,
  { centres, maxIterations, minMove, onProgress }: Pick<LloydInput, 'centres' | 'maxIterations' | 'minMove' | 'onProgress'>,
): LloydResult {
  const { math } = lab;
  const state = startState(lab, rows, centres);
  const { groups, slack } = state;
  let converged = false;
  let iterations = 0;
  while (!converged && iterations < maxIterations) {
    const changed = math.assign(rows, groups, slack);
    const reseeded = reseedEmpty(state);
    const largestMove = moveCentres(state);
    iterations += 1;
    converged = !reseeded && (changed === 0 || largestMove <= minMove);
    onProgress?.(iterations / maxIterations);
  }
  math.assign(rows, groups, slack);
  reseedEmpty(state);
  const { inertia, moved } = settle(state);
  return {
    labels: groups.labels.slice(),
    centres: groups.centres.slice(),
    lead: leads(state, moved),
    inertia,
    iterations,
    converged,
  };
}

/** Bytes of a lab for k groups of n rows of p coordinates. */
export function groupBytes(n: number, k: number, p: number): number {
  const centreValues = k * evenStride(p);
  // Leads and labels, a byte each; centres with their padded copy; sums; mass, counts and slack.
  return f64Bytes(n, n / 8, 2 * centreValues, centreValues, k, k, k);
}

function startState(lab: Lab, rows: RowTable, centres: Float64Array): State {
  const { n, stride } = rows;
  const k = centres.length / stride;
  const groups: RowGroups = {
    k,
    centres: copyInto(lab, centres),
    labels: lab.u8(n).fill(NO_LABEL),
    lead: lab.f64(n).fill(-Infinity),
    sums: lab.f64(centres.length),
    mass: lab.f64(k),
    counts: lab.u32(k),
  };
  return { math: lab.math, rows, groups, slack: lab.f64(k) };
}

/** Leads of the rows after the last moves. */
function leads({ groups: { lead, labels }, slack }: State, moved: number): Float64Array {
  const out = new Float64Array(lead.length);
  for (let i = 0; i < out.length; i++) out[i] = lead[i]! - slack[labels[i]!]! - 2 * moved;
  return out;
}

/** Moves row i from its group to another. */
function moveRow({ rows, groups }: State, i: number, to: number): void {
  const { points, weights, stride } = rows;
  const { labels, sums, mass, counts } = groups;
  const w = weights ? weights[i]! : 1;
  const from = labels[i]!;
  mass[from]! -= w;
  counts[from]! -= 1;
  mass[to]! += w;
  counts[to]! += 1;
  for (let j = 0; j < stride; j++) {
    const value = w * points[i * stride + j]!;
    sums[from * stride + j]! -= value;
    sums[to * stride + j]! += value;
  }
  labels[i] = to;
}

/** Puts each centre without rows on the farthest row of another group; true when it had to. */
function reseedEmpty(state: State): boolean {
  const { counts, lead, mass, sums } = state.groups;
  const { stride } = state.rows;
  const empty = [...counts.keys()].filter((c) => counts[c] === 0);
  for (const c of empty) {
    const row = farthestRow(state);
    if (row < 0) return false;
    mass[c] = 0;
    sums.fill(0, c * stride, (c + 1) * stride);
    moveRow(state, row, c);
  }
  if (empty.length > 0) lead.fill(-Infinity);
  return empty.length > 0;
}

/** The row farthest from its own centre among groups of two rows or more; -1 when none. */
function farthestRow({ rows, groups }: State): number {
  const { points, n, stride } = rows;
  const { centres, labels, counts } = groups;
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
function moveCentres({ rows, groups, slack }: State): number {
  const { stride } = rows;
  const { k, centres, sums, mass } = groups;
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
 * Means summed afresh, free of the rounding of thousands of single moves; gives the inertia and the
 * largest move. The squared distances are taken to the centres as they were: moving a centre to the
 * mean of its rows lowers their sum by mass times the squared move, exactly.
 */
function settle({ math, rows, groups }: State): { inertia: number; moved: number } {
  const { stride } = rows;
  const { k, centres, sums, mass } = groups;
  sums.fill(0);
  mass.fill(0);
  let inertia = math.sumGroups(rows, groups);
  let moved = 0;
  for (let c = 0; c < k; c++) {
    if (!(mass[c]! > 0)) continue;
    let sq = 0;
    for (let j = c * stride; j < (c + 1) * stride; j++) {
      const mean = sums[j]! / mass[c]!;
      sq += (mean - centres[j]!) ** 2;
      centres[j] = mean;
    }
    inertia -= mass[c]! * sq;
    moved = Math.max(moved, Math.sqrt(sq));
  }
  return { inertia: Math.max(0, inertia), moved };
}
