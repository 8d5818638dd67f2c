import { dot, toDegrees } from '#kernels/geometry/directions.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { seededRandom, type Random } from '#kernels/random.ts';
import { orientationTensor } from './orientation-tensor.ts';
import { checkUnitVectors } from './unit-vectors.ts';

/** Angle between the principal axes of two sets of poles, tested by whole holes. */
export interface OrientationDifference {
  /** 0..90 degrees. */
  angleDeg: number;
  /** Share of relabellings with an angle as large; null with too few holes. */
  p: number | null;
  /** Holes counted on the first and the second side. */
  holes: [number, number];
  /** Why there is no p, in words; null when it is given. */
  refusal: string | null;
}

const LEAST_HOLES = 4;

/**
 * Do two sets of planes differ in orientation: the angle between their first axes, with a p from
 * dealing whole holes to the two sides at random. Poles of one hole are alike, so holes and not
 * poles are exchanged; a hole that reaches into both sides counts as two.
 *
 * @param poles Unit vectors, row-major, shape (n, 3).
 * @param holes Hole number of each pole.
 * @param isSecond 1 where a pole belongs to the second side.
 * @param options.draws Relabellings, 999 unless told.
 * @throws {KernelError} `shape`; `too-few-rows` when a side is empty; `not-unit`; `bad-parameter`.
 */
export function orientationDifference(
  poles: Float64Array,
  holes: Int32Array,
  isSecond: Uint8Array,
  options: { seed: number; draws?: number; onProgress?: (share: number) => void },
): OrientationDifference {
  const { seed, draws = 999, onProgress } = options;
  const n = checkUnitVectors(poles);
  if (holes.length !== n || isSecond.length !== n) {
    throw new KernelError(
      'shape',
      `expected ${n} holes and sides, found ${holes.length}, ${isSecond.length}`,
    );
  }
  if (!(draws >= 1)) throw new KernelError('bad-parameter', `expected draws >= 1, found ${draws}`);
  const blocks = [...blocksOf(holes, isSecond).values()];
  const inSecond = blocks.map(({ second }) => second);
  const counts: [number, number] = [
    inSecond.filter((second) => !second).length,
    inSecond.filter(Boolean).length,
  ];
  const angleDeg = angleBetween(poles, blocks, inSecond);
  if (Math.min(...counts) < LEAST_HOLES) {
    const refusal = `No p: ${counts.join(' and ')} holes, ${LEAST_HOLES} needed on each side.`;
    return { angleDeg, p: null, holes: counts, refusal };
  }
  const random = seededRandom(seed);
  let reached = 0;
  for (let draw = 0; draw < draws; draw++) {
    shuffle(inSecond, random);
    if (angleBetween(poles, blocks, inSecond) >= angleDeg - 1e-9) reached++;
    onProgress?.((draw + 1) / draws);
  }
  return { angleDeg, p: (1 + reached) / (draws + 1), holes: counts, refusal: null };
}

interface Block {
  second: boolean;
  rows: number[];
}

/** The poles of one hole on one side. */
function blocksOf(holes: Int32Array, isSecond: Uint8Array): Map<string, Block> {
  const blocks = new Map<string, Block>();
  holes.forEach((hole, row) => {
    const second = isSecond[row] === 1;
    const block = blocks.get(`${hole}/${second}`) ?? { second, rows: [] };
    block.rows.push(row);
    blocks.set(`${hole}/${second}`, block);
  });
  return blocks;
}

function angleBetween(poles: Float64Array, blocks: Block[], inSecond: boolean[]): number {
  const axisOf = (side: boolean) => {
    const rows = blocks.flatMap((block, i) => (inSecond[i] === side ? block.rows : []));
    const part = new Float64Array(3 * rows.length);
    rows.forEach((row, i) => part.set(poles.subarray(3 * row, 3 * row + 3), 3 * i));
    return orientationTensor(part).axes[0];
  };
  return toDegrees(Math.acos(Math.min(1, Math.abs(dot(axisOf(false), axisOf(true))))));
}

function shuffle(list: boolean[], random: Random): void {
  for (let i = list.length - 1; i > 0; i--) {
    const j = random.below(i + 1);
    [list[i], list[j]] = [list[j]!, list[i]!];
  }
}
