import { KernelError } from '#kernels/kernel-error.ts';
import { ELEMENT_BY_SYMBOL } from '#kernels/units/atomic-weights.ts';
import { massFraction } from './minerals.ts';

/** Carbonate as calcite, mass %. Screening only: see MINERAL_CAUTION. */
export interface CarbonateProxy {
  calcitePercent: number;
  /** `maximum` when it rests on calcium, which plagioclase and others hold too. */
  kind: 'from-carbon' | 'maximum';
  /** Molar Mg / Ca above the limit with carbon: dolomite or ankerite rather than calcite. */
  isMagnesian: boolean;
}

/** Molar Mg / Ca from which carbonate is read as dolomite or ankerite. */
export const MAGNESIAN_RATIO = 0.4;

const weight = (symbol: string): number => ELEMENT_BY_SYMBOL.get(symbol)?.weight ?? NaN;

/** Calcium that fluorapatite takes per phosphorus, by mass: 5 Ca / 3 P. */
export const CALCIUM_PER_PHOSPHORUS = (5 * weight('Ca')) / (3 * weight('P'));

/**
 * Carbonate as calcite: from inorganic carbon, else an upper bound from the calcium that apatite
 * leaves.
 *
 * @param percents Mass %; null where not assayed. `C` is inorganic carbon.
 * @returns Null when neither carbon nor calcium is assayed.
 * @throws {KernelError} `bad-parameter` at a grade outside 0..100 %.
 */
export function carbonateProxy(percents: {
  C: number | null;
  Ca: number | null;
  P: number | null;
  Mg: number | null;
}): CarbonateProxy | null {
  for (const [element, percent] of Object.entries(percents)) {
    if (percent === null || (percent >= 0 && percent <= 100)) continue;
    const message = `expected ${element} in 0..100 %, found ${percent}`;
    throw new KernelError('bad-parameter', message);
  }
  const { C, Ca, P, Mg } = percents;
  const isMagnesian =
    C !== null && C > 0 && Mg !== null && Ca !== null && Ca > 0
      ? Mg / weight('Mg') / (Ca / weight('Ca')) > MAGNESIAN_RATIO
      : false;
  if (C !== null) {
    return { calcitePercent: C / massFraction('calcite', 'C'), kind: 'from-carbon', isMagnesian };
  }
  if (Ca === null) return null;
  const free = Math.max(0, Ca - CALCIUM_PER_PHOSPHORUS * (P ?? 0));
  return { calcitePercent: free / massFraction('calcite', 'Ca'), kind: 'maximum', isMagnesian };
}
