/**
 * Squared distance between two rows of one stride. Even and odd coordinates are summed apart, as two
 * lanes do: the same bits as `DenseMath` finds.
 */
export function squaredDistance(
  points: Float64Array,
  row: number,
  centres: Float64Array,
  centre: number,
  stride: number,
): number {
  let [even, odd] = [0, 0];
  const [a, b] = [row * stride, centre * stride];
  for (let j = 0; j + 1 < stride; j += 2) {
    const d = points[a + j]! - centres[b + j]!;
    const e = points[a + j + 1]! - centres[b + j + 1]!;
    even += d * d;
    odd += e * e;
  }
  if (stride % 2 === 1) even += (points[a + stride - 1]! - centres[b + stride - 1]!) ** 2;
  return even + odd;
}
