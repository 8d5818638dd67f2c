import { toRadians } from '#kernels/geometry/directions.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { orientationTensor, type OrientationTensor } from './orientation-tensor.ts';
import { lineAtPoint, type Net } from './projection.ts';
import { checkUnitVectors } from './unit-vectors.ts';

/** Planes that the holes of one direction hardly cut. */
export interface BlindZone {
  /** Share of all orientations that no hole meets at the least alpha or more. */
  share: number;
  /** Directions of the holes as axes: a strong cluster means one blind band. */
  holes: OrientationTensor;
}

/** Blind poles over a net. */
export interface BlindGrid {
  size: number;
  /** Row-major from south-west, x east fastest: 1 where a pole there is blind, NaN off the net. */
  values: Float64Array;
}

/** Alpha (degrees) under which a plane is hardly cut (common practice: 10 to 15). */
export const LEAST_ALPHA = 10;
const POINTS = 4000;

/**
 * How much of all plane orientations a set of hole directions is blind to: planes met by every hole
 * at less than `leastAlphaDeg`. One direction alone is blind to a share sin alpha. The share comes
 * from 4000 evenly spread poles.
 *
 * @param tangents Unit vectors along the holes, row-major, shape (n, 3).
 * @throws {KernelError} `shape`; `too-few-rows`; `not-unit`; `bad-parameter` at an angle outside (0, 90).
 */
export function blindZone(tangents: Float64Array, leastAlphaDeg = LEAST_ALPHA): BlindZone {
  const least = leastSine(tangents, leastAlphaDeg);
  const golden = Math.PI * (3 - Math.sqrt(5));
  let blind = 0;
  for (let i = 0; i < POINTS; i++) {
    const z = (i + 0.5) / POINTS;
    const r = Math.sqrt(1 - z * z);
    if (isBlind(tangents, [r * Math.cos(golden * i), r * Math.sin(golden * i), z], least)) blind++;
  }
  return { share: blind / POINTS, holes: orientationTensor(tangents) };
}

/**
 * The blind zone over a net, to be shaded behind poles.
 *
 * @param options.size Nodes along a side, >= 3, 61 unless told.
 * @throws {KernelError} As `blindZone`.
 */
export function blindGrid(
  tangents: Float64Array,
  net: Net,
  options: { leastAlphaDeg?: number; size?: number } = {},
): BlindGrid {
  const { leastAlphaDeg = LEAST_ALPHA, size = 61 } = options;
  const least = leastSine(tangents, leastAlphaDeg);
  if (!(Number.isInteger(size) && size >= 3)) {
    throw new KernelError('bad-parameter', `expected 3 or more grid nodes, found ${size}`);
  }
  const values = new Float64Array(size * size).fill(NaN);
  for (let row = 0; row < size; row++) {
    for (let col = 0; col < size; col++) {
      const [x, y] = [-1 + (2 * col) / (size - 1), -1 + (2 * row) / (size - 1)];
      if (x * x + y * y > 1 + 1e-12) continue;
      values[row * size + col] = Number(isBlind(tangents, lineAtPoint(x, y, net), least));
    }
  }
  return { size, values };
}

function leastSine(tangents: Float64Array, leastAlphaDeg: number): number {
  checkUnitVectors(tangents);
  if (!(leastAlphaDeg > 0 && leastAlphaDeg < 90)) {
    const message = `expected a least alpha in (0, 90), found ${leastAlphaDeg}`;
    throw new KernelError('bad-parameter', message);
  }
  return Math.sin(toRadians(leastAlphaDeg));
}

function isBlind(tangents: Float64Array, [x, y, z]: readonly number[], least: number): boolean {
  for (let i = 0; i < tangents.length; i += 3) {
    const sine = tangents[i]! * x! + tangents[i + 1]! * y! + tangents[i + 2]! * z!;
    if (Math.abs(sine) >= least) return false;
  }
  return true;
}
