import { lineOf, planeNormal, planeOf, type Line, type Plane } from '#kernels/geometry/planes.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { axialUniformity, fabric, type UniformityTest } from './fabric.ts';
import { fisherMean } from './fisher.ts';
import { orientationTensor } from './orientation-tensor.ts';
import { flipToAxis } from './unit-vectors.ts';

/** A measured plane with how far its measurement is to be trusted. */
export interface MeasuredPlane extends Plane {
  /** Confidence of the measurement, such as `good`, `moderate`, `poor`. */
  confidence: string;
  /** Sampling weight > 0, such as Terzaghi's; 1 when left out. */
  weight?: number;
}

/** A set of confidences summarised together, such as good and moderate. */
export interface ConfidenceClass {
  name: string;
  confidences: readonly string[];
}

/** Orientation of the planes of one confidence class. Null where the class gives no such value. */
export interface OrientationClass {
  name: string;
  n: number;
  /** Effective number under the weights. */
  nEffective: number;
  /** Plane across the first axis of the poles. */
  meanPlane: Plane | null;
  /** Third axis of the poles: the fold axis where they form a girdle. */
  girdleAxis: Line | null;
  /** S1 >= S2 >= S3 of the poles. */
  eigenvalues: readonly [number, number, number] | null;
  woodcockK: number | null;
  woodcockC: number | null;
  point: number | null;
  girdle: number | null;
  random: number | null;
  fisherKappa: number | null;
  alpha95Deg: number | null;
  uniformity: UniformityTest | null;
  /** Whether the mean plane may turn lengths into true thickness. */
  isFitForThickness: boolean;
  /** What is not given and why, in words. */
  refusals: string[];
}

/** Fewest planes for a test, and the widest cone of a mean plane fit for true thickness. */
export const LEAST_PLANES_FOR_TEST = 10;
const WIDEST_CONE_DEG = 20;

/**
 * Orientation statistics of planes by confidence class: mean plane, orientation tensor of the poles,
 * Woodcock's and Vollmer's fabric, Fisher precision and cone (unweighted, poles turned to one side
 * first), and Bingham's test of uniformity. A class may hold few or no planes: what it cannot give is
 * null and named in `refusals`.
 *
 * @param planes Degrees; a horizontal plane has a null dip direction.
 * @param options.classes Each plane counts in every class that lists its confidence.
 * @returns One per class, in the order given.
 * @throws {KernelError} `bad-parameter` at an angle out of range; `not-positive` at a weight.
 */
export function orientationSummary(
  planes: readonly MeasuredPlane[],
  options: { classes: readonly ConfidenceClass[] },
): OrientationClass[] {
  return options.classes.map(({ name, confidences }) =>
    summarise(
      name,
      planes.filter(({ confidence }) => confidences.includes(confidence)),
    ),
  );
}

/** Upward unit normals of planes, row-major, shape (n, 3): their poles as axes. */
export function polesOf(planes: readonly Plane[]): Float64Array {
  return Float64Array.from(planes.flatMap((plane) => planeNormal(plane.dip, plane.dipDirection)));
}

function summarise(name: string, planes: readonly MeasuredPlane[]): OrientationClass {
  if (planes.length === 0) return emptyClass(name);
  const poles = polesOf(planes);
  const { n, nEffective, eigenvalues, axes } = orientationTensor(poles, weightsOf(planes));
  const { k, c, ...shares } = fabric(eigenvalues);
  const fisher = fisherMean(flipToAxis(poles, axes[0]));
  const isTested = nEffective >= LEAST_PLANES_FOR_TEST;
  const narrow = fisher.alpha95Deg !== null && fisher.alpha95Deg <= WIDEST_CONE_DEG;
  const isCluster = k === null ? eigenvalues[0] - eigenvalues[1] > 0.5 : k > 1;
  return {
    name,
    n,
    nEffective,
    meanPlane: planeOf(axes[0]),
    girdleAxis: n > 2 ? lineOf(axes[2]) : null,
    eigenvalues,
    woodcockK: k,
    woodcockC: c,
    ...shares,
    fisherKappa: fisher.kappa,
    alpha95Deg: fisher.alpha95Deg,
    uniformity: isTested ? axialUniformity(eigenvalues, nEffective) : null,
    isFitForThickness: isTested && isCluster && narrow,
    refusals: refusalsOf({ n, nEffective, k, c, isCluster, alpha95Deg: fisher.alpha95Deg }),
  };
}

function weightsOf(planes: readonly MeasuredPlane[]): Float64Array {
  return Float64Array.from(planes, ({ weight = 1 }, row) => {
    if (weight > 0 && weight < Infinity) return weight;
    throw new KernelError(
      'not-positive',
      `expected a weight > 0, found ${weight} at plane ${row}`,
      { row },
    );
  });
}

interface Findings {
  n: number;
  nEffective: number;
  k: number | null;
  c: number | null;
  isCluster: boolean;
  alpha95Deg: number | null;
}

function refusalsOf({ n, nEffective, k, c, isCluster, alpha95Deg }: Findings): string[] {
  const count = n === Math.round(nEffective) ? `${n}` : `${n} (effective ${nEffective.toFixed(1)})`;
  const thickness = 'true thickness is withheld';
  const list: [boolean, string][] = [
    [
      nEffective < LEAST_PLANES_FOR_TEST,
      `No test: ${count} planes, ${LEAST_PLANES_FOR_TEST} needed; ${thickness}.`,
    ],
    [c === null, 'No fabric strength: the poles lie in one plane or on one axis.'],
    [c !== null && k === null, 'No fabric shape: the second and third eigenvalues are equal.'],
    [
      !isCluster,
      `The poles form no cluster; read the girdle axis, not the mean plane; ${thickness}.`,
    ],
    [alpha95Deg === null, `No cone of confidence about the mean plane; ${thickness}.`],
    [
      alpha95Deg !== null && alpha95Deg > WIDEST_CONE_DEG,
      `The 95 % cone is wider than ${WIDEST_CONE_DEG} degrees; ${thickness}.`,
    ],
  ];
  return list.filter(([applies]) => applies).map(([, words]) => words);
}

function emptyClass(name: string): OrientationClass {
  return {
    name,
    n: 0,
    nEffective: 0,
    meanPlane: null,
    girdleAxis: null,
    eigenvalues: null,
    woodcockK: null,
    woodcockC: null,
    point: null,
    girdle: null,
    random: null,
    fisherKappa: null,
    alpha95Deg: null,
    uniformity: null,
    isFitForThickness: false,
    refusals: ['No planes of this class.'],
  };
}
