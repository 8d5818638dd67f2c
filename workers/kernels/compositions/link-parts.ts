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
 * binary partition whose balances set apart what varies together. Ties go to the earlier parts.
 *
 * @param matrix T, row-major (nParts, nParts), symmetric.
 * @throws {KernelError} `too-few-parts` under two, `shape`.
 * @see Sokal & Michener (1958) for the linkage; Egozcue & Pawlowsky-Glahn (2005), Math. Geol. 37.
 */
export function linkParts(matrix: Float64Array, nParts: number): PartTree {
  requireSquare(matrix, nParts);
  let sets = Array.from({ length: nParts }, (_, part) => [part]);
  const meanBetween = (a: readonly number[], b: readonly number[]) =>
    a.reduce((sum, i) => sum + b.reduce((part, j) => part + matrix[i * nParts + j]!, 0), 0) /
    (a.length * b.length);
  const merges: PartTree['merges'] = [];
  while (sets.length > 1) {
    let best = { above: sets[0]!, below: sets[1]!, height: Infinity };
    sets.forEach((above, i) => {
      for (const below of sets.slice(i + 1)) {
        const height = meanBetween(above, below);
        if (height < best.height) best = { above, below, height };
      }
    });
    const { above, below } = best;
    merges.push(best);
    sets = sets.flatMap((set) =>
      set === above ? [[...above, ...below]] : set === below ? [] : [set],
    );
  }
  const signOf = (merge: PartTree['merges'][number], part: number) =>
    merge.above.includes(part) ? 1 : merge.below.includes(part) ? -1 : 0;
  const signs = merges
    .toReversed()
    .map((merge) => Array.from({ length: nParts }, (_, part) => signOf(merge, part)));
  return { merges, order: sets[0]!, signs };
}
