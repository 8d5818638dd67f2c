import { copyInto, f64Bytes, type Lab } from '#kernels/dense/lab.ts';
import { columnsByFour, type MixtureRoom, type MixtureTables } from '#kernels/dense/dense-math.ts';
import { isAxial, type MixtureDensity } from './mixture-model.ts';
import { packedSize } from './packed-cholesky.ts';

/** Rows worked on together, so that every inner loop runs over rows and everything stays in cache. */
export const BLOCK_ROWS = 256;

/** Bytes of a lab that a block and a density take. */
export const mixtureBlockBytes = (k: number, p: number): number =>
  f64Bytes(...[p, k, columnsByFour(p), 1, 1, 1].map((columns) => columns * BLOCK_ROWS)) +
  f64Bytes(k * p, k * packedSize(p), k);

/** A block of rows for models of K groups and p coordinates. */
export function mixtureBlock(lab: Lab, k: number, p: number): MixtureRoom {
  return {
    stride: BLOCK_ROWS,
    p,
    x: lab.f64(p * BLOCK_ROWS),
    shares: lab.f64(k * BLOCK_ROWS),
    logDensity: lab.f64(BLOCK_ROWS),
    deviations: lab.f64(columnsByFour(p) * BLOCK_ROWS),
    rows: lab.u32(BLOCK_ROWS),
    roots: lab.f64(BLOCK_ROWS),
  };
}

/** A density copied into a lab. */
export function densityTables(lab: Lab, { model, whiteners, logScales }: MixtureDensity): MixtureTables {
  return {
    k: model.k,
    isAxial: isAxial(model.family),
    means: copyInto(lab, model.means),
    whiteners: copyInto(lab, whiteners),
    logScales: copyInto(lab, logScales),
  };
}

/** Copies `count` rows from row `from` of a row-major table into the block. */
export function fillBlock({ x, p }: MixtureRoom, points: Float64Array, from: number, count: number): void {
  for (let r = 0, at = from * p; r < count; r++)
    for (let j = 0; j < p; j++) x[j * BLOCK_ROWS + r] = points[at++]!;
}
