import { KernelError } from '#kernels/kernel-error.ts';
import { seededRandom } from '#kernels/random.ts';
import { pairIndex } from './condensed-distances.ts';
import { drawRows } from './k-means-starts.ts';
import type { OnProgress } from '#kernels/progress.ts';
import { byHole, type Regroup } from './stability.ts';

/** Input of `consensus`. */
export interface ConsensusInput {
  /** Hole of each row: whole holes are drawn. */
  hole: ArrayLike<number>;
  regroup: Regroup;
  seed: number;
  /** Default 100. */
  resamples?: number | undefined;
  /** Share of the holes in each resample, drawn without replacement; default 0.8. */
  share?: number | undefined;
  /** Rows compared at most, default 1,500 once there are more than 3,000. */
  maxRows?: number | undefined;
  onProgress?: OnProgress | undefined;
}

/** How consistently pairs of rows fall together. */
export interface Consensus {
  /** Rows compared. */
  rows: Uint32Array;
  /** Per pair of those rows, (0,1) (0,2) ...: times together over times both drawn; NaN when never both drawn. */
  together: Float64Array;
  /** Share of pairs between .1 and .9: neither together nor apart; lower is better. Null without pairs. */
  ambiguous: number | null;
}

/** Up to here all rows are compared; beyond, a fixed draw. */
const ALL_ROWS = 3000;
const DRAWN_ROWS = 1500;

/**
 * Consensus over regroupings of random parts of the holes, and the proportion of ambiguous pairs.
 *
 * @throws {KernelError} `bad-parameter`; `too-few-rows` below two holes; `shape`.
 * @see Monti, Tamayo, Mesirov & Golub (2003), Machine Learning 52 (from memory).
 */
export function consensus(input: ConsensusInput): Consensus {
  const { hole, regroup, seed, resamples = 100, share = 0.8, onProgress } = input;
  if (!(share > 0 && share <= 1 && resamples >= 1 && Math.floor(resamples) === resamples)) {
    const message = `expected a share in (0, 1] and resamples a whole number >= 1, found ${share} and ${resamples}`;
    throw new KernelError('bad-parameter', message);
  }
  const holes = byHole(hole);
  if (holes.length < 2)
    throw new KernelError(
      'too-few-rows',
      `expected at least 2 holes to draw from, found ${holes.length}`,
    );
  const n = hole.length;
  const most = input.maxRows ?? (n > ALL_ROWS ? DRAWN_ROWS : n);
  const rows = drawRows(n, Math.min(n, most), seededRandom(seed));
  const nPairs = (rows.length * (rows.length - 1)) / 2;
  const tally = { same: new Uint32Array(nPairs), both: new Uint32Array(nPairs) };
  for (let b = 0; b < resamples; b++) {
    const drawn = drawPart(holes, share, seed + 1 + b);
    const fresh = regroup(drawn, b);
    if (fresh.length !== drawn.length)
      throw new KernelError('shape', `${fresh.length} new labels for ${drawn.length} rows`);
    const labelOf = new Int32Array(n).fill(-1);
    drawn.forEach((row, i) => (labelOf[row] = fresh[i]!));
    addPairs(tally, rows, labelOf);
    onProgress?.((b + 1) / resamples);
  }
  const together = Float64Array.from(tally.same, (same, i) => same / tally.both[i]!);
  const known = together.filter((value) => !Number.isNaN(value));
  const unclear = known.filter((value) => value > 0.1 && value < 0.9).length;
  return { rows, together, ambiguous: known.length > 0 ? unclear / known.length : null };
}

/** Rows of a share of the holes (at least one), ascending. */
function drawPart(holes: readonly number[][], share: number, seed: number): Uint32Array {
  const random = seededRandom(seed);
  const order = [...holes.keys()];
  const count = Math.max(1, Math.round(share * holes.length));
  for (let i = 0; i < count; i++) {
    const pick = i + random.below(order.length - i);
    [order[i], order[pick]] = [order[pick]!, order[i]!];
  }
  const rows = order.slice(0, count).flatMap((h) => holes[h]!);
  return Uint32Array.from(rows).sort();
}

function addPairs(
  tally: { same: Uint32Array; both: Uint32Array },
  rows: Uint32Array,
  labelOf: Int32Array,
): void {
  for (let a = 0; a < rows.length; a++) {
    const label = labelOf[rows[a]!]!;
    if (label < 0) continue;
    for (let b = a + 1; b < rows.length; b++) {
      const other = labelOf[rows[b]!]!;
      if (other < 0) continue;
      const at = pairIndex(a, b, rows.length);
      tally.both[at]! += 1;
      if (label > 0 && label === other) tally.same[at]! += 1; // unassigned rows are together with none
    }
  }
}
