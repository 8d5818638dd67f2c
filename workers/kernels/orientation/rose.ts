import { KernelError } from '#kernels/kernel-error.ts';

/** One petal of a strike rose; its mirror image lies 180 degrees away. */
export interface RosePetal {
  fromDeg: number;
  toDeg: number;
  count: number;
  /** sqrt(count / largest count): areas, not radii, compare. */
  radius: number;
}

/**
 * Axial rose of strikes over 0..180 degrees.
 *
 * @param strikesDeg Any turn; 190 counts as 010.
 * @param binDeg Width of a petal, a divisor of 180; 10 unless told.
 * @throws {KernelError} `bad-parameter`; `not-finite` with { row }.
 */
export function strikeRose(strikesDeg: Float64Array, binDeg = 10): RosePetal[] {
  const bins = 180 / binDeg;
  if (!(Number.isInteger(bins) && bins >= 1)) {
    throw new KernelError('bad-parameter', `expected a divisor of 180 degrees, found ${binDeg}`);
  }
  const counts = new Int32Array(bins);
  strikesDeg.forEach((strike, row) => {
    if (!Number.isFinite(strike)) {
      throw new KernelError('not-finite', `expected a strike, found ${strike} in row ${row}`, {
        row,
      });
    }
    // a strike a rounding error below 180 falls into the first petal by the second modulo
    counts[Math.floor((((strike % 180) + 180) % 180) / binDeg) % bins]! += 1;
  });
  const most = Math.max(1, ...counts);
  return Array.from(counts, (count, i) => ({
    fromDeg: i * binDeg,
    toDeg: (i + 1) * binDeg,
    count,
    radius: Math.sqrt(count / most),
  }));
}
