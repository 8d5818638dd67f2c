import { toRadians } from '#kernels/geometry/directions.ts';
import { lineVector } from '#kernels/geometry/planes.ts';

/** Unit vectors of lines given by trend and plunge (degrees, down positive): east, north, up. */
export function lines(...trendPlunge: [number, number][]): Float64Array {
  return Float64Array.from(trendPlunge.flatMap(([trend, plunge]) => lineVector({ trend, plunge })));
}

/** Turns every vector about the axis (0, 0, 1) and then about (1, 0, 0), angles in degrees. */
export function rotated(vectors: Float64Array, aboutZ: number, aboutX: number): Float64Array {
  const [c, s] = [Math.cos(toRadians(aboutZ)), Math.sin(toRadians(aboutZ))];
  const [d, t] = [Math.cos(toRadians(aboutX)), Math.sin(toRadians(aboutX))];
  const out = new Float64Array(vectors.length);
  for (let i = 0; i < vectors.length; i += 3) {
    const [x = 0, y = 0, z = 0] = vectors.subarray(i, i + 3);
    const [u, v] = [c * x - s * y, s * x + c * y];
    out.set([u, d * v - t * z, t * v + d * z], i);
  }
  return out;
}
