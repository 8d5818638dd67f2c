/** Sets of 0..n-1 that grow together. */
export interface DisjointSets {
  /** The member that stands for the set of `item`. */
  readonly find: (item: number) => number;
  /** Joins two sets; `b`'s representative stands for both. */
  readonly join: (a: number, b: number) => void;
}

/** n sets of one item each. */
export function disjointSets(n: number): DisjointSets {
  const parent = Int32Array.from({ length: n }, (_, i) => i);
  const find = (item: number): number => {
    while (parent[item] !== item) item = parent[item] = parent[parent[item]!]!;
    return item;
  };
  return {
    find,
    join: (a, b) => {
      parent[find(a)] = find(b);
    },
  };
}
