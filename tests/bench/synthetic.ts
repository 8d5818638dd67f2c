import { seededRandom } from '#kernels/random.ts';

/** Lognormal parts that share two factors, as grades do; shape (nParts columns, nRows). */
export function lognormalParts(nRows: number, nParts: number): Float64Array[] {
  const random = seededRandom(7);
  const factors = [0, 1].map(() => Float64Array.from({ length: nRows }, () => random.normal()));
  return Array.from({ length: nParts }, (_, part) => {
    const column = new Float64Array(new SharedArrayBuffer(8 * nRows));
    for (let row = 0; row < nRows; row++) {
      column[row] = Math.exp(Math.sin(part) * (factors[0]?.[row] ?? 0) + Math.cos(part) * (factors[1]?.[row] ?? 0) + 0.3 * random.uniform());
    }
    return column;
  });
}

/** `k` round clouds of spread 1 that overlap, as scores of rocks do; shape (nColumns, nRows). */
export function clouds(nRows: number, nColumns: number, k: number): Float64Array[] {
  const random = seededRandom(11);
  const centres = Array.from({ length: k }, () => Array.from({ length: nColumns }, () => 1.2 * random.normal()));
  const columns = Array.from({ length: nColumns }, () => new Float64Array(new SharedArrayBuffer(8 * nRows)));
  for (let row = 0; row < nRows; row++) {
    const centre = centres[random.below(k)] ?? [];
    columns.forEach((column, i) => (column[row] = (centre[i] ?? 0) + 2 * (random.uniform() + random.uniform() + random.uniform())));
  }
  return columns;
}
