import type { IntervalTable } from '#kernels/intervals/interval-table.ts';
import { orderByDepth } from '#kernels/intervals/interval-table.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { faultBlocks, type FaultStop } from '#kernels/recipe/fault-blocks.ts';
import { faultCrossing } from '#kernels/recipe/fault-sides.ts';
import type { Category } from '#kernels/tables/category.ts';

/** Signed distances of the two ends of each interval to one fault (m); NaN without position. */
export interface EndDistances {
  atFromM: Float64Array;
  atToM: Float64Array;
}

/** Intervals cut where they cross faults. */
export interface FaultPieces extends IntervalTable {
  /** Interval each piece comes from. */
  row: Int32Array;
  /** Fault block of each piece; see `faultBlocks`. */
  block: Category;
}

/** Pieces shorter than this are rounding (m). */
const LEAST_PIECE_M = 1e-6;

/**
 * Cuts intervals at the depths where they cross faults and gives every piece its fault block. The
 * distance to a fault is taken as linear between the ends of an interval; a fault that has stopped
 * does not cut. Metres are conserved.
 *
 * @param intervals n intervals, in any order; pieces come in the same order of rows.
 * @param distances One per fault, in the order of the block code.
 * @param stops Which faults stop at which.
 * @throws {KernelError} `shape`; `bad-interval` with { row }; `bad-parameter` at a stop.
 */
export function faultPieces(
  intervals: IntervalTable,
  distances: readonly EndDistances[],
  stops: readonly FaultStop[] = [],
): FaultPieces {
  const n = intervals.fromM.length;
  orderByDepth(intervals);
  if (distances.some(({ atFromM, atToM }) => atFromM.length !== n || atToM.length !== n)) {
    throw new KernelError('shape', `expected ${n} distances of both ends to every fault`);
  }
  const cuts = Array.from({ length: n }, (_, row) => cutsOf(distances, row));
  const shares = cuts.flatMap((at, row) => at.slice(1).map((to, i) => ({ row, from: at[i]!, to })));
  const middles = distances.map(({ atFromM, atToM }) =>
    Float64Array.from(shares, ({ row, from, to }) => {
      const middle = (from + to) / 2;
      return (1 - middle) * atFromM[row]! + middle * atToM[row]!;
    }),
  );
  const block =
    distances.length > 0
      ? faultBlocks(middles, stops)
      : { levels: [''], codes: new Int32Array(shares.length) };
  return joined(intervals, shares, block);
}

/** Shares of an interval at which a fault is crossed, from 0 to 1. */
function cutsOf(distances: readonly EndDistances[], row: number): number[] {
  const crossings = distances
    .map(({ atFromM, atToM }) => faultCrossing(atFromM[row]!, atToM[row]!))
    .filter((share) => share !== null)
    .filter((share) => share > 0 && share < 1);
  return [0, ...new Set(crossings.sort((a, b) => a - b)), 1];
}

interface Share {
  row: number;
  from: number;
  to: number;
}

/** Joins pieces of one interval whose block is the same, and slivers to the piece above. */
function joined(
  { fromM, toM }: IntervalTable,
  shares: readonly Share[],
  block: Category,
): FaultPieces {
  const pieces: { row: number; fromM: number; toM: number; code: number }[] = [];
  shares.forEach(({ row, from, to }, i) => {
    const [top, lengthM] = [fromM[row]!, toM[row]! - fromM[row]!];
    const code = block.codes[i]!;
    const bottom = to === 1 ? toM[row]! : top + to * lengthM;
    const above = pieces[pieces.length - 1];
    const isSliver = (to - from) * lengthM < LEAST_PIECE_M;
    if (above?.row === row && (above.code === code || isSliver)) above.toM = bottom;
    else pieces.push({ row, fromM: from === 0 ? top : above!.toM, toM: bottom, code });
  });
  return {
    row: Int32Array.from(pieces, ({ row }) => row),
    fromM: Float64Array.from(pieces, (piece) => piece.fromM),
    toM: Float64Array.from(pieces, (piece) => piece.toM),
    block: { levels: block.levels, codes: Int32Array.from(pieces, ({ code }) => code) },
  };
}
