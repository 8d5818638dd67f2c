/**
 * The few loops that most of the computing time goes into. There are two of each: two lanes at a time
 * in WebAssembly (`workers/simd`), and a plain twin (`plain-math.ts`) that does the same operations in
 * the same order, so that both give the same bits. Arrays live in the memory of a {@link Lab}.
 *
 * Blocks hold a stretch of `stride` values per column, of which the first `count` rows are in use.
 */
export interface DenseMath {
  /**
   * Replaces the values of a block by their natural logarithms less a shift per column.
   *
   * @returns -1, or the place in `x` of the first value that is not a finite number > 0.
   */
  lnLess(x: Float64Array, stride: number, count: number, nCols: number, shift: Float64Array): number;
  /**
   * cross[i, j] += Σ x_i[r] x_j[r] for j >= i, the heart of a covariance.
   *
   * @param nCols A multiple of four.
   * @param cross Row-major (nCols, nCols); the upper triangle is what is asked for, some cells below
   *   the diagonal are filled too.
   */
  addCrossProducts(x: Float64Array, stride: number, count: number, nCols: number, cross: Float64Array): void;
  /** sums[j] += Σ x_j[r]. */
  addColumnSums(x: Float64Array, stride: number, count: number, nCols: number, sums: Float64Array): void;
  /**
   * out_k[r] = Σ_j weight_k[j] x_j[r], out in the same stride.
   *
   * @param weights Four outputs at a time: for each column their four weights.
   * @param nOut A multiple of four.
   */
  project(x: Float64Array, stride: number, count: number, nCols: number, weights: Float64Array, nOut: number, out: Float64Array): void;
  /** Takes the mean of each row of a row-major table off its values. */
  centreRows(x: Float64Array, nRows: number, nCols: number): void;
  /** Sorts the first n values ascending; none may be NaN. `spare` has room for n, `counts` for 12,288. */
  sort(x: Float64Array, n: number, spare: Float64Array, counts: Uint32Array): void;
  /** For each row the nearest centre (the first on a tie) and the squared distances to it and to the next. */
  nearestTwo(rows: RowTable, centres: Float64Array, k: number, labels: Uint8Array, nearestSq: Float64Array, nextSq: Float64Array): void;
  /**
   * Gives each row its nearest centre and moves it between the sums of the groups; a row whose lead over
   * the next centre is larger than the slack of its group stays unmeasured.
   *
   * @returns Rows whose label changed.
   */
  assign(rows: RowTable, groups: RowGroups, slack: Float64Array): number;
  /** Adds every row to the sums of its group; returns Σ weight × squared distance to its centre. */
  sumGroups(rows: RowTable, groups: RowGroups): number;
  /**
   * Single-row exchanges (see `exchangeRows`) over at most `maxPasses` passes.
   *
   * @param reach A row whose lead over the next centre is larger stays, as long as no group is lighter
   *   than `least`: such rows are passed over.
   * @returns How much the inertia fell.
   */
  exchange(rows: RowTable, groups: RowGroups, reach: number, least: number, maxPasses: number): number;
  /**
   * Sums of distances between rows sorted by group: sums[g, a] += Σ_b in g |x_a - x_b| and the same for
   * b, over the pairs a < b with a in [from, to).
   *
   * @param x One stretch of `stride` values per column.
   * @param starts First row of each group and, at last, the number of rows.
   * @param sums Shape (k, stride).
   */
  addDistances(x: Float64Array, stride: number, p: number, starts: Uint32Array, k: number, from: number, to: number, sums: Float64Array): void;
  /**
   * Shares of each group of a normal mixture in the rows of a block, and ln density per row. Strides are
   * even. A group more than e^37 times less likely than the likeliest has exactly 0.
   */
  mixtureShares(block: MixtureRoom, count: number, density: MixtureTables): void;
  /**
   * Adds the rows of a block to the moments of group c about its mean, weighted by its shares.
   *
   * @returns The sum of the shares.
   */
  addGroupMoments(block: MixtureRoom, count: number, c: number, density: MixtureTables, moments: MixtureMoments): number;
}

/** Rows of an even number of coordinates, row after row. */
export interface RowTable {
  points: Float64Array;
  n: number;
  stride: number;
  /** One per row, or null when all count 1. */
  weights: Float64Array | null;
}

/** A partition of rows that is worked on. */
export interface RowGroups {
  k: number;
  /** Shape (k, stride). */
  centres: Float64Array;
  /** Group of each row; 255: none yet. */
  labels: Uint8Array;
  /** Per row: how much nearer its own centre is than the next, at least (plus what was slack then). */
  lead: Float64Array;
  /** Σ weight × row, shape (k, stride); Σ weight; rows. */
  sums: Float64Array;
  mass: Float64Array;
  counts: Uint32Array;
}

/** A block of rows, column by column, with what is worked out about it. */
export interface MixtureRoom {
  stride: number;
  p: number;
  x: Float64Array;
  /** Shape (k, stride). */
  shares: Float64Array;
  logDensity: Float64Array;
  /** Room: p columns, rounded up to a multiple of four; the added ones stay zero. */
  deviations: Float64Array;
  rows: Uint32Array;
  roots: Float64Array;
}

/** A density of K normal groups: see `MixtureDensity`. */
export interface MixtureTables {
  k: number;
  isAxial: boolean;
  means: Float64Array;
  whiteners: Float64Array;
  logScales: Float64Array;
}

/** Sums per group: first (K, p), squares (K, p), cross (K, nCols, nCols) of padded columns, null: squares only. */
export interface MixtureMoments {
  first: Float64Array;
  squares: Float64Array;
  cross: Float64Array | null;
  nCols: number;
}

/** Columns rounded up to the multiple of four that products are taken of. */
export const columnsByFour = (n: number): number => 4 * Math.ceil(n / 4);

/** Numbers `DenseMath.sort` counts with. */
export const SORT_COUNTS = 6 * 2048;
/** No group yet. */
export const NO_LABEL = 255;
