import { KernelError } from '#kernels/kernel-error.ts';
import { requireFinite } from '#kernels/statistics/require-finite.ts';
import { requirePositions, type Positions } from './positions.ts';

/** Edges of a cell in metres. */
export interface CellSize {
  x: number;
  y: number;
  z: number;
}

export interface DeclusterOptions {
  /** Shifts of the grid, j/offsets of a cell on all axes together; 8 unless told. */
  offsets?: number;
  /** Corner the unshifted grid starts from; the least coordinates unless told. */
  origin?: CellSize;
}

/** Places of the grid must stay whole numbers that a double holds. */
const MAX_CELLS = Number.MAX_SAFE_INTEGER;

/**
 * Cell declustering weights: a row shares its cell's weight with the other rows there and every
 * occupied cell weighs the same, w = n / (occupied cells x rows in the cell), averaged over shifts of
 * the grid.
 *
 * @param positions n composites of equal support. Not modified.
 * @param cell Edges in metres, > 0; preferably the nominal hole spacing.
 * @returns n weights > 0 whose sum is n.
 * @throws {KernelError} `shape`; `too-few-rows`; `not-finite`; `bad-parameter` for a cell, a number of
 *   offsets or an origin above the data, or cells too small for the extent.
 * @see Journel (1983); Deutsch & Journel (1998), Oxford University Press (from memory).
 */
export function declusterWeights(
  positions: Positions,
  cell: CellSize,
  options: DeclusterOptions = {},
): Float64Array {
  const n = requirePositions(positions);
  const { offsets = 8, origin = leastOf(positions) } = options;
  requireCell(cell);
  if (!(Number.isInteger(offsets) && offsets >= 1))
    throw new KernelError('bad-parameter', `expected 1 or more offsets, found ${offsets}`);
  const weights = new Float64Array(n);
  for (let offset = 0; offset < offsets; offset++) {
    const keys = cellKeys(positions, cell, origin, offset / offsets);
    const counts = new Map<number, number>();
    for (const key of keys) counts.set(key, (counts.get(key) ?? 0) + 1);
    const share = n / counts.size;
    for (let row = 0; row < n; row++) weights[row]! += share / (counts.get(keys[row]!) ?? 1);
  }
  const total = weights.reduce((sum, weight) => sum + weight, 0);
  return weights.map((weight) => (weight * n) / total);
}

function requireCell({ x, y, z }: CellSize): void {
  if ([x, y, z].every((edge) => edge > 0 && edge < Infinity)) return;
  throw new KernelError('bad-parameter', `expected cell edges > 0 m, found ${x}, ${y}, ${z}`);
}

const least = (values: Float64Array): number => values.reduce((a, b) => Math.min(a, b), Infinity);
const most = (values: Float64Array): number => values.reduce((a, b) => Math.max(a, b), -Infinity);

function leastOf({ x, y, z }: Positions): CellSize {
  return { x: least(x), y: least(y), z: least(z) };
}

/** One number for the cell of each row. */
function cellKeys(
  { x, y, z }: Positions,
  cell: CellSize,
  origin: CellSize,
  shift: number,
): Float64Array {
  const place = (value: number, start: number, edge: number) =>
    Math.floor((value - start) / edge + shift);
  const cellsAlong = (values: Float64Array, start: number, edge: number) =>
    place(most(values), start, edge) + 1;
  const nx = cellsAlong(x, origin.x, cell.x);
  const ny = cellsAlong(y, origin.y, cell.y);
  const nz = cellsAlong(z, origin.z, cell.z);
  if (
    !(nx * ny * nz <= MAX_CELLS) ||
    least(x) < origin.x ||
    least(y) < origin.y ||
    least(z) < origin.z
  )
    throw new KernelError(
      'bad-parameter',
      `expected a grid that holds the data, found ${nx} x ${ny} x ${nz} cells from ${origin.x}, ${origin.y}, ${origin.z}`,
    );
  return x.map(
    (value, row) =>
      place(value, origin.x, cell.x) +
      nx * (place(y[row]!, origin.y, cell.y) + ny * place(z[row]!, origin.z, cell.z)),
  );
}

/** One cell size and the mean it leads to. */
export interface DeclusterPoint {
  /** Horizontal edge, m. */
  sizeM: number;
  mean: number;
}

export interface DeclusterCurve {
  points: DeclusterPoint[];
  naiveMean: number;
  /** The size at the extreme of the curve. */
  chosen: DeclusterPoint;
  /** Said when the curve has no extreme between its ends. */
  note: string | null;
}

export interface CurveOptions extends DeclusterOptions {
  /** Horizontal edges to try, m, ascending; 20 from extent/50 to the extent unless told. */
  sizesM?: readonly number[];
  /** Vertical edge, m: the bench, or five composites. The horizontal edge when left out. */
  verticalM?: number;
  /** Which ground was drilled closer: `high` grade seeks the least mean, `low` the greatest. */
  clustered?: 'high' | 'low';
  onProgress?: (share: number) => void;
}

/**
 * Declustered mean against cell size, with the size at its extreme. The nominal hole spacing, where
 * there is one, is the better choice.
 *
 * @param values n grades, finite.
 * @throws {KernelError} As `declusterWeights`; `constant` when all positions share one spot in plan.
 */
export function declusterCurve(
  positions: Positions,
  values: Float64Array,
  options: CurveOptions = {},
): DeclusterCurve {
  const n = requirePositions(positions);
  requireFinite(values, 'grades');
  if (values.length !== n)
    throw new KernelError('shape', `expected ${n} grades, found ${values.length}`);
  const sizes = options.sizesM ?? cellSizesFor(positions);
  if (sizes.length === 0)
    throw new KernelError('bad-parameter', 'expected a cell size, found none');
  const points = sizes.map((sizeM, i): DeclusterPoint => {
    const cell = { x: sizeM, y: sizeM, z: options.verticalM ?? sizeM };
    const weights = declusterWeights(positions, cell, options);
    options.onProgress?.((i + 1) / sizes.length);
    return { sizeM, mean: values.reduce((sum, value, row) => sum + value * weights[row]!, 0) / n };
  });
  const sign = options.clustered === 'low' ? -1 : 1;
  const chosen = points.reduce((best, point) =>
    sign * point.mean < sign * best.mean ? point : best,
  );
  const atEnd = chosen === points[0] || chosen === points.at(-1);
  return {
    points,
    naiveMean: values.reduce((sum, value) => sum + value, 0) / n,
    chosen,
    note: atEnd
      ? 'The curve has no extreme between its ends: take the nominal hole spacing.'
      : null,
  };
}

/**
 * Twenty sizes at equal ratios from a fiftieth of the larger horizontal extent to the extent.
 *
 * @throws {KernelError} `constant` when all positions share one spot in plan.
 */
export function cellSizesFor(positions: Positions, count = 20): number[] {
  requirePositions(positions);
  const { x, y } = positions;
  const extent = Math.max(most(x) - least(x), most(y) - least(y));
  if (!(extent > 0))
    throw new KernelError('constant', 'expected positions that differ in plan, all share one spot');
  return Array.from({ length: count }, (_, i) => (extent / 50) * 50 ** (i / (count - 1)));
}
