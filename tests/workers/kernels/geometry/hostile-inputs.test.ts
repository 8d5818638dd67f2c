import { polesOfAlpha } from '#kernels/geometry/alpha-circle.ts';
import { categoryCurve, depthsOf, depthSteps, gradeCurve } from '#kernels/geometry/depth-log.ts';
import { directionOf, gridAzimuth, tangentOf, wrapAzimuth } from '#kernels/geometry/directions.ts';
import { faultDistanceBins } from '#kernels/geometry/fault-distance-bins.ts';
import { faultPieces } from '#kernels/geometry/fault-pieces.ts';
import { fractureMeasures, samplingWeight } from '#kernels/geometry/fracture-measures.ts';
import { desurvey } from '#kernels/geometry/minimum-curvature.ts';
import { nearestOnTriangle } from '#kernels/geometry/nearest-on-triangle.ts';
import {
  coreFromPlane,
  gammaFromLine,
  lineFromCore,
  planeFromCore,
} from '#kernels/geometry/oriented-core.ts';
import {
  lineOf,
  lineVector,
  planeNormal,
  planeOf,
  planeOfPole,
  poleOf,
  strikeOf,
  upwardNormal,
} from '#kernels/geometry/planes.ts';
import { positionAtDepth, positionsAtDepths } from '#kernels/geometry/position-at-depth.ts';
import { distancesToSurface } from '#kernels/geometry/surface-distance.ts';
import { piecesOfLeg, traceHole } from '#kernels/geometry/trace.ts';
import { prepareSurface } from '#kernels/geometry/triangulated-surface.ts';
import { thicknessOnCore, trueThickness } from '#kernels/geometry/true-thickness.ts';
import { weldVertices } from '#kernels/geometry/weld-vertices.ts';
import { directionsOf, metresOf, testHostileInputs } from '#tests/support/hostile-inputs.ts';

const each = (of: (value: number) => unknown) => (values: Float64Array) =>
  Array.from(values, (value) => of(value));
const vectors =
  (of: (vector: readonly [number, number, number]) => unknown) =>
  (x: Float64Array, y: Float64Array, z: Float64Array) =>
    Array.from(x, (east, i) => of([east, y[i]!, z[i]!]));
const hole = { azimuth: 315, dip: -55 };
const path = desurvey(
  [0, 0, 0],
  [
    { depthM: 0, azimuth: 0, dip: -60 },
    { depthM: 100, azimuth: 20, dip: -50 },
  ],
);
const points = (x: Float64Array, y: Float64Array, z: Float64Array) =>
  Float64Array.from(Array.from(x, (east, i) => [east, y[i]!, z[i]!]).flat());
/** Every three vertices a triangle. */
const fan = ({ length }: Float64Array) =>
  Int32Array.from({ length: Math.floor(length / 3) * 3 }, (_, i) => i);
const plate = prepareSurface(Float64Array.of(0, 0, 0, 9, 0, 0, 0, 9, 0), Int32Array.of(0, 1, 2));

testHostileInputs([
  ['polesOfAlpha', each((alpha) => polesOfAlpha(hole, alpha, 8))],
  ['depthSteps', each((stepM) => depthsOf(depthSteps(0, 100, stepM)))],
  ['depthSteps, end', each((endM) => depthsOf(depthSteps(0, endM, 1)))],
  [
    'categoryCurve',
    (fromM) =>
      categoryCurve(
        { fromM: fromM.toSorted(), toM: fromM.toSorted().map((top) => top + 0.001) },
        new Int32Array(fromM.length),
        depthSteps(0, 40, 1),
      ),
  ],
  ['gradeCurve', (values) => gradeCurve(metresOf(values), values, depthSteps(0, 40, 1)), 'missing'],
  ['tangentOf', each((azimuth) => tangentOf({ azimuth, dip: -azimuth }))],
  ['directionOf', vectors(directionOf)],
  ['gridAzimuth', each((magnetic) => gridAzimuth(magnetic, 12, 1))],
  [
    'faultDistanceBins',
    (distances, values, lengths) =>
      faultDistanceBins(distances, values, lengths, new Int32Array(lengths.length)).map(
        ({ metres, mean }) => [metres, mean],
      ),
  ],
  [
    'faultPieces',
    (atFromM, atToM) =>
      faultPieces(metresOf(atFromM), [{ atFromM: atFromM.map((x) => x - 3), atToM }]),
  ],
  ['samplingWeight', each((alpha) => samplingWeight(alpha))],
  ['fractureMeasures', (alphas) => fractureMeasures(alphas, 10)],
  ['fractureMeasures, length', each((lengthM) => fractureMeasures(Float64Array.of(30), lengthM))],
  [
    'desurvey',
    (depths, azimuths, dips) =>
      desurvey(
        [0, 0, 0],
        Array.from(depths, (depthM, i) => ({ depthM, azimuth: azimuths[i]!, dip: -dips[i]! })),
      ),
  ],
  [
    'desurvey, collar',
    each((east) => desurvey([east, 0, 0], [{ depthM: 0, azimuth: 0, dip: -60 }])),
  ],
  [
    'nearestOnTriangle',
    vectors((p) =>
      nearestOnTriangle(p, [
        [0, 0, 0],
        [9, 0, 0],
        [0, 9, 0],
      ]),
    ),
  ],
  ['planeFromCore', each((alpha) => planeFromCore(hole, { alpha, beta: 40 }))],
  ['planeFromCore, beta', each((beta) => planeFromCore(hole, { alpha: 40, beta }))],
  ['lineFromCore', each((gamma) => lineFromCore(hole, { alpha: 40, beta: 40 }, gamma))],
  ['coreFromPlane', vectors((normal) => coreFromPlane(hole, normal))],
  ['planeNormal', each((dip) => planeNormal(dip, dip))],
  ['planeOf', vectors(planeOf)],
  ['upwardNormal', vectors(upwardNormal)],
  ['lineVector', each((trend) => lineVector({ trend, plunge: trend }))],
  ['lineOf', vectors(lineOf)],
  ['positionsAtDepths', (depths) => positionsAtDepths(path, depths)],
  ['traceHole', each((toDepthM) => traceHole(path, toDepthM))],
  ['piecesOfLeg', each((lengthM) => piecesOfLeg(lengthM, 0.1, 0.05))],
  ['distancesToSurface', (x, y, z) => distancesToSurface(points(x, y, z), plate), 'missing'],
  ['prepareSurface', (x, y, z) => prepareSurface(points(x, y, z), fan(x)).areaM2],
  ['weldVertices', (x, y, z) => weldVertices(points(x, y, z), 1e-6)],
  ['trueThickness', each((lengthM) => trueThickness(lengthM, [0, 0, -1], [0, 0, 1]))],
  [
    'trueThickness, tangent',
    (x, y, z) => {
      const tangents = directionsOf(x, y, z);
      return Array.from(x, (_, i) => {
        const [east = NaN, north = NaN, up = NaN] = tangents.subarray(3 * i, 3 * i + 3);
        return trueThickness(10, [east, north, up], [0, 0, 1]);
      });
    },
  ],
  ['thicknessOnCore', each((alpha) => thicknessOnCore(10, alpha))],
  ['wrapAzimuth', each(wrapAzimuth)],
  ['gammaFromLine', vectors((line) => gammaFromLine(hole, { alpha: 40, beta: 40 }, line))],
  ['poleOf', each((dip) => poleOf({ dip, dipDirection: dip }))],
  ['planeOfPole', each((plunge) => planeOfPole({ plunge, trend: plunge }))],
  ['strikeOf', each((dipDirection) => strikeOf({ dip: 30, dipDirection }))],
  ['positionAtDepth', each((depthM) => positionAtDepth(path, depthM))],
]);
