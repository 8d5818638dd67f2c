import { KernelError } from '#kernels/kernel-error.ts';

/**
 * What must stand beside every penalty: shown with the numbers, wherever they are shown.
 */
export const PENALTY_CAUTION =
  'Penalties and limits differ by contract, plant and site: none is built in. The figures are screening only, to be confirmed by laboratory test work and the contract itself. They support, and do not replace, the judgement of a qualified (competent) person.';

/** Penalty of one element by the user's own contract: a charge for each step above the onset. */
export interface PenaltyTerms {
  onsetPpm: number;
  /** Grade step that is charged once, ppm, > 0. */
  stepPpm: number;
  /** Charge per step, in the user's money per tonne, >= 0. */
  chargePerStep: number;
  /** Whether a step begun is charged whole; else in proportion. */
  isWholeStep?: boolean;
  /** Grade from which the concentrate is refused; null for none. */
  rejectPpm?: number | null;
}

export interface Penalty {
  steps: number;
  charge: number;
  isRejected: boolean;
}

/**
 * Charge for a deleterious grade: none up to the onset, then a charge for each step above it.
 *
 * @throws {KernelError} `bad-parameter` at a grade or terms that are none.
 * @see Common practice of concentrate contracts.
 */
export function penalty(gradePpm: number, terms: PenaltyTerms): Penalty {
  const { onsetPpm, stepPpm, chargePerStep, isWholeStep = false, rejectPpm = null } = terms;
  const areTerms =
    onsetPpm >= 0 &&
    stepPpm > 0 &&
    stepPpm < Infinity &&
    chargePerStep >= 0 &&
    chargePerStep < Infinity;
  if (!areTerms || (rejectPpm !== null && !(rejectPpm >= onsetPpm))) {
    const found = [onsetPpm, stepPpm, chargePerStep, rejectPpm ?? 'none'].join(', ');
    const message = `expected an onset >= 0, a step > 0, a charge >= 0 and a rejection above the onset, found ${found}`;
    throw new KernelError('bad-parameter', message);
  }
  if (!(gradePpm >= 0 && gradePpm < Infinity)) {
    throw new KernelError('bad-parameter', `expected a grade >= 0 ppm, found ${gradePpm}`);
  }
  const above = Math.max(0, gradePpm - onsetPpm) / stepPpm;
  // rounding must not begin a step
  const steps = isWholeStep ? Math.ceil(above - 1e-9) : above;
  const isRejected = rejectPpm !== null && gradePpm >= rejectPpm;
  return { steps: steps + 0, charge: steps * chargePerStep, isRejected };
}

/** Share of a domain over an onset. */
export interface OverOnset {
  assayedM: number;
  overM: number;
  /** overM / assayedM; null without assayed metres. */
  shareOfMetres: number | null;
  /** The same weighted by length x density; null without densities. */
  shareOfTonnage: number | null;
}

/**
 * Length and, with densities, a stand-in for tonnage (length x density) at or over an onset.
 *
 * @param valuesPpm n values, NaN where not assayed.  @param lengthsM n lengths, >= 0.
 * @param densityTPerM3 n densities > 0 where assayed.
 * @throws {KernelError} `shape`; `bad-parameter` with { row }.
 */
export function shareOverOnset(
  valuesPpm: Float64Array,
  lengthsM: Float64Array,
  onsetPpm: number,
  densityTPerM3?: Float64Array,
): OverOnset {
  const n = valuesPpm.length;
  if (lengthsM.length !== n || (densityTPerM3 && densityTPerM3.length !== n)) {
    const found = `${lengthsM.length} lengths and ${densityTPerM3?.length ?? 'no'} densities`;
    throw new KernelError('shape', `expected ${n} values, found ${found}`);
  }
  if (!(onsetPpm >= 0)) {
    throw new KernelError('bad-parameter', `expected an onset >= 0 ppm, found ${onsetPpm}`);
  }
  let [assayedM, overM, tonnage, overTonnage] = [0, 0, 0, 0];
  for (let row = 0; row < n; row++) {
    const value = valuesPpm[row]!;
    if (Number.isNaN(value)) continue;
    const [length, density] = [lengthsM[row]!, densityTPerM3?.[row] ?? 1];
    if (!(value >= 0 && length >= 0 && length < Infinity && density > 0 && density < Infinity)) {
      const message = `expected a grade, a length and a density in row ${row}, found ${value}, ${length}, ${density}`;
      throw new KernelError('bad-parameter', message, { row });
    }
    const isOver = value >= onsetPpm;
    assayedM += length;
    tonnage += length * density;
    if (!isOver) continue;
    overM += length;
    overTonnage += length * density;
  }
  return {
    assayedM,
    overM,
    shareOfMetres: assayedM > 0 ? overM / assayedM : null,
    shareOfTonnage: densityTPerM3 && tonnage > 0 ? overTonnage / tonnage : null,
  };
}
