import { KernelError } from '#kernels/kernel-error.ts';

/** A deleterious element followed from the head into a concentrate. All grades in ppm. */
export interface ConcentrateInput {
  headPpm: number;
  /** Grade of the metal the concentrate is sold for. */
  metalHeadPpm: number;
  metalConcentratePpm: number;
  /** Recoveries into the concentrate, 0..1. */
  recovery: number;
  metalRecovery: number;
  /** Head grade of the metal below which the ratio is too unsteady to use. */
  leastMetalHeadPpm: number;
}

export interface ConcentrateGrade {
  /** Tonnes of concentrate per tonne of head. */
  massPull: number;
  gradePpm: number;
}

/**
 * Grade of a deleterious element in a concentrate by mass balance: mass pull = head metal x its
 * recovery / concentrate metal; grade = head x recovery / mass pull.
 *
 * @returns Null when the head holds less metal than the least given: the ratio has no use there.
 * @throws {KernelError} `bad-parameter` at a negative or infinite grade, a recovery outside (0, 1] for the metal
 *   or [0, 1] for the element, or a concentrate grade that is not > 0.
 */
export function concentrateGrade(input: ConcentrateInput): ConcentrateGrade | null {
  const { headPpm, metalHeadPpm, metalConcentratePpm, recovery, metalRecovery, leastMetalHeadPpm } =
    input;
  const areGrades =
    [headPpm, metalHeadPpm, metalConcentratePpm, leastMetalHeadPpm].every(
      (grade) => grade >= 0 && grade < Infinity,
    ) && metalConcentratePpm > 0;
  const areRecoveries = recovery >= 0 && recovery <= 1 && metalRecovery > 0 && metalRecovery <= 1;
  if (!areGrades || !areRecoveries) {
    const found = `grades ${headPpm}, ${metalHeadPpm}, ${metalConcentratePpm} ppm, recoveries ${recovery}, ${metalRecovery}`;
    throw new KernelError(
      'bad-parameter',
      `expected grades >= 0 and recoveries up to 1, found ${found}`,
    );
  }
  if (metalHeadPpm === 0 || metalHeadPpm < leastMetalHeadPpm) return null;
  const massPull = (metalHeadPpm * metalRecovery) / metalConcentratePpm;
  return { massPull, gradePpm: (headPpm * recovery) / massPull };
}

/**
 * Ratio of a deleterious element to the metal, row by row: it sets the concentrate grade, which the
 * element alone does not.
 *
 * @param elementPpm, metalPpm n values each, NaN where not assayed.
 * @param leastMetalPpm Rows with less metal, or none, give NaN.
 * @throws {KernelError} `shape`; `bad-parameter` at a least grade < 0, with { row } at an infinite one.
 */
export function ratioToMetal(
  elementPpm: Float64Array,
  metalPpm: Float64Array,
  leastMetalPpm: number,
): Float64Array {
  if (elementPpm.length !== metalPpm.length) {
    throw new KernelError(
      'shape',
      `expected as many values, found ${elementPpm.length} and ${metalPpm.length}`,
    );
  }
  if (!(leastMetalPpm >= 0))
    throw new KernelError('bad-parameter', `expected a least grade >= 0, found ${leastMetalPpm}`);
  return elementPpm.map((value, row) => {
    const metal = metalPpm[row]!;
    if (Math.abs(value) === Infinity || Math.abs(metal) === Infinity) {
      const message = `expected grades or NaN, found ${value} and ${metal} in row ${row}`;
      throw new KernelError('bad-parameter', message, { row });
    }
    return metal > 0 && metal >= leastMetalPpm ? value / metal : NaN;
  });
}
