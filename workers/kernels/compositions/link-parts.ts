import { averageLinkage } from '#kernels/clustering/average-linkage.ts';
import { requireSquare } from './part-relations.ts';

/** Parts joined step by step, the most nearly proportional first. */
export interface PartTree {
  /** Each merge joins two sets of parts; `height` is the mean T between them. */
  merges: { above: number[]; below: number[]; height: number }[];
  /** Parts in the order of the leaves: neighbours belong together. */
  order: number[];
  /** One row of signs per balance, the last merge first: a sequential binary partition. */
  signs: number[][];
}

/**
 * Average linkage of parts on their variation matrix: an order for a heat map, and a sequential
 * binary partition whose balances set apart what varies together. Equal means are
 * settled in the same way each time.
 *
 * @param matrix T, row-major (nParts, nParts), symmetric.
 * @throws {KernelError} `too-few-parts` under two, `shape`.
 * @see Sokal & Michener (1958) for the linkage; Egozcue & Pawlowsky-Glahn (2005), Math. Geol. 37.
 */
export function linkParts(matrix: Float64Array, nParts: number): PartTree {
  requireSquare(matrix, nParts);
  const members = Array.from({ length: nParts }, (_, part) => [part]);
  const merges = averageLinkage(matrix, nParts).map(({ a, b, height }) => {
    const [above, below] = [members[a]!, members[b]!];
    members.push([...above, ...below]);
    return { above, below, height };
  });
  const signOf = (merge: PartTree['merges'][number], part: number) =>
    merge.above.includes(part) ? 1 : merge.below.includes(part) ? -1 : 0;
  const signs = merges
    .toReversed()
    .map((merge) => Array.from({ length: nParts }, (_, part) => signOf(merge, part)));
  return { merges, order: members.at(-1) ?? [], signs };
}
