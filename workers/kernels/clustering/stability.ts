import { KernelError } from '#kernels/kernel-error.ts';
import { seededRandom } from '#kernels/random.ts';
import { compactLabels, type Labels } from './group-moments.ts';
import type { OnProgress } from '#kernels/progress.ts';

/** Groups the given rows afresh: labels 1..K in their order, 0 = unassigned. */
export type Regroup = (rows: Uint32Array, resample: number) => Labels;

/** Input of `bootstrapStability`. */
export interface StabilityInput {
  /** The grouping to judge: 1..K per row, 0 = unassigned. */
  labels: Labels;
  /** Hole of each row, any number per hole: whole holes are drawn, since the rows of a hole depend on each other. */
  hole: ArrayLike<number>;
  regroup: Regroup;
  seed: number;
  /** Default 100. */
  resamples?: number | undefined;
  onProgress?: OnProgress | undefined;
}

/** How well one group comes back. */
export interface GroupStability {
  label: number;
  /** Mean over resamples of the largest Jaccard index with a new group; null when it was never drawn. */
  jaccard: number | null;
  /** Resamples that held rows of the group. */
  resamples: number;
  /** Resamples in which the index fell below .5. */
  dissolved: number;
  reading: StabilityReading | null;
}

/** Common readings of the mean index: under .6, .75 and .85, and from .85 on. */
export type StabilityReading = 'dissolved' | 'doubtful' | 'valid' | 'highly stable';

/**
 * Stability of each group under resampling of whole holes: the rows drawn are grouped afresh, and for
 * every group A the best |A ∩ B| / |A ∪ B| over new groups B counts, both taken over the distinct rows
 * drawn (a hole drawn twice counts once in the comparison). Resample b draws from sub-seed seed + b.
 *
 * @throws {KernelError} `shape`; `bad-parameter` for a label or the resamples; `too-few-rows` below two
 *   holes.
 * @see Hennig (2007), Comput. Stat. Data Anal. 52, 258-271.
 */
export function bootstrapStability(input: StabilityInput): GroupStability[] {
  const { labels, hole, regroup, seed, resamples = 100, onProgress } = input;
  if (labels.length !== hole.length)
    throw new KernelError('shape', `${labels.length} labels for ${hole.length} holes`);
  if (!(resamples >= 1 && Math.floor(resamples) === resamples))
    throw new KernelError(
      'bad-parameter',
      `expected resamples a whole number >= 1, found ${resamples}`,
    );
  const { labelOf } = compactLabels(labels);
  const rowsOfHole = byHole(hole);
  if (rowsOfHole.length < 2)
    throw new KernelError(
      'too-few-rows',
      `expected at least 2 holes to draw from, found ${rowsOfHole.length}`,
    );
  const found = new Map(labelOf.map((label): [number, number[]] => [label, []]));
  for (let b = 0; b < resamples; b++) {
    const rows = drawHoles(rowsOfHole, seed + b);
    const fresh = regroup(rows, b);
    if (fresh.length !== rows.length)
      throw new KernelError('shape', `${fresh.length} new labels for ${rows.length} rows`);
    for (const [label, index] of bestJaccard(labels, rows, fresh)) found.get(label)?.push(index);
    onProgress?.((b + 1) / resamples);
  }
  return labelOf.map((label) => summary(label, found.get(label) ?? []));
}

function summary(label: number, indices: readonly number[]): GroupStability {
  const jaccard =
    indices.length > 0 ? indices.reduce((sum, value) => sum + value, 0) / indices.length : null;
  const dissolved = indices.filter((value) => value < 0.5).length;
  return { label, jaccard, resamples: indices.length, dissolved, reading: readingOf(jaccard) };
}

function readingOf(jaccard: number | null): StabilityReading | null {
  if (jaccard === null) return null;
  if (jaccard < 0.6) return 'dissolved';
  if (jaccard < 0.75) return 'doubtful';
  return jaccard < 0.85 ? 'valid' : 'highly stable';
}

/** Rows of each hole, holes in order of first row. */
export function byHole(hole: ArrayLike<number>): number[][] {
  const rows = new Map<number, number[]>();
  for (let row = 0; row < hole.length; row++) {
    const id = hole[row]!;
    const known = rows.get(id);
    if (known) known.push(row);
    else rows.set(id, [row]);
  }
  return [...rows.values()];
}

/** As many holes as there are, drawn with replacement; a hole drawn twice gives its rows twice. */
function drawHoles(rowsOfHole: readonly number[][], seed: number): Uint32Array {
  const random = seededRandom(seed);
  return Uint32Array.from(rowsOfHole.flatMap(() => rowsOfHole[random.below(rowsOfHole.length)]!));
}

/**
 * For every group of `labels` among the rows drawn, the largest Jaccard index with a new group.
 *
 * @param labels Label per row of the whole table.
 * @param rows Rows drawn; only the first time a row occurs counts.
 * @param fresh New label of each row drawn.
 */
export function bestJaccard(
  labels: Labels,
  rows: ArrayLike<number>,
  fresh: Labels,
): Map<number, number> {
  const seen = new Set<number>();
  const together = new Map<number, Map<number, number>>();
  const ofOld = new Map<number, number>();
  const ofNew = new Map<number, number>();
  const count = (counts: Map<number, number>, key: number) =>
    counts.set(key, (counts.get(key) ?? 0) + 1);
  for (let i = 0; i < rows.length; i++) {
    const row = rows[i]!;
    if (seen.has(row)) continue;
    seen.add(row);
    const [old, next] = [labels[row]!, fresh[i]!];
    if (next > 0) count(ofNew, next);
    if (old === 0) continue;
    count(ofOld, old);
    const shared = together.get(old) ?? new Map<number, number>();
    together.set(old, shared);
    if (next > 0) count(shared, next);
  }
  const best = new Map<number, number>();
  for (const [old, size] of ofOld) {
    let most = 0;
    for (const [next, both] of together.get(old) ?? [])
      most = Math.max(most, both / (size + (ofNew.get(next) ?? 0) - both));
    best.set(old, most);
  }
  return best;
}
