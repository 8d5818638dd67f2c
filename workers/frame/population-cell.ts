import type { CellDetail, MixtureFit } from '#contract/screens.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import type { LognormalMixture } from '#kernels/populations/lognormal-mixture.ts';
import { screenPopulation, type PopulationScreen } from '#kernels/populations/screen-population.ts';
import type { AssayColumn } from './snapshot-tables.ts';

export interface PopulationInput {
  subsetKey: string;
  subsetLabel: string;
  variable: string;
  assay: AssayColumn;
  /** Metres of each row; null counts rows equally (surface samples). */
  weightsM: Float64Array | null;
  /** 1 where a row is in the subset. */
  mask: Uint8Array;
}

interface SubsetRows {
  values: Float64Array;
  qualifiers: Uint8Array;
  weights: Float64Array | null;
}

const MISSING_PLOT = { z: [], ppm: [], drawnOf: 0 };

function pick({ assay, weightsM, mask }: PopulationInput): SubsetRows {
  const rows = Int32Array.from(mask.keys()).filter((row) => mask[row] === 1);
  return {
    values: Float64Array.from(rows, (row) => assay.values[row] ?? Number.NaN),
    qualifiers: Uint8Array.from(rows, (row) => assay.qualifiers[row] ?? 3),
    weights: weightsM && Float64Array.from(rows, (row) => weightsM[row] ?? 0),
  };
}

/** A grade that cannot be judged, such as one with many values over range, is told so and fails no other cell. */
function judged({ values, qualifiers, weights }: SubsetRows): PopulationScreen | KernelError {
  try {
    return screenPopulation(values, weights, qualifiers, { unit: 'ppm' });
  } catch (error) {
    if (error instanceof KernelError) return error;
    throw error;
  }
}

const fitOf = ({ k, bic, logLik, accepted, note, components }: LognormalMixture): MixtureFit => ({
  k, bic, logLik, accepted, note, components: components.map(({ share, median, logSd }) => ({ share, medianPpm: median, logSd })),
});

const names = ({ subsetKey, subsetLabel, variable }: PopulationInput) => ({ subsetKey, subsetLabel, variable });

/** Screens one variable in one subset for mixed populations, in the contract's words. */
export function populationCell(input: PopulationInput): CellDetail {
  const rows = pick(input);
  const screen = judged(rows);
  if (screen instanceof KernelError) return refused(input, rows, screen);
  const { n, nBelow, nAbove, nMissing, dip, mixtures, chosenK, summaries, plot, histogram } = screen;
  const summary = summaries?.weighted ?? summaries?.unweighted ?? null;
  return {
    ...names(input), verdict: screen.verdict, n, nBelow, nAbove, nMissing, metres: screen.metres ?? n, weighted: rows.weights !== null,
    mean: summary?.mean ?? null, median: summary?.median ?? null, cv: summary?.cv ?? null, min: summary?.min ?? null, max: summary?.max ?? null, logSd: summaries?.logSd ?? null,
    dip: dip?.dip ?? null, dipP: dip?.pValue?.p ?? null, dipPText: dip?.pValue ? `p ${dip.pValue.text}` : 'no p', deltaBic: screen.deltaBic, populations: chosenK, chosenK,
    mixtures: mixtures.map(fitOf), evenOddsPpm: screen.evenOdds, reasons: screen.reasons,
    plot: plot ? { z: Array.from(plot.z), ppm: Array.from(plot.y, Math.exp), drawnOf: plot.drawnOf } : MISSING_PLOT,
    histogram: histogram ? { edgesPpm: Array.from(histogram.edges, Math.exp), counts: Array.from(histogram.counts) } : { edgesPpm: [], counts: [] },
    notes: screen.notes,
  };
}

function refused(input: PopulationInput, { values, qualifiers, weights }: SubsetRows, { message }: KernelError): CellDetail {
  const count = (code: number): number => qualifiers.reduce((sum, qualifier) => sum + (qualifier === code ? 1 : 0), 0);
  const n = count(0) + count(1) + count(2);
  return {
    ...names(input), verdict: 'too-few', n, nBelow: count(1), nAbove: count(2), nMissing: values.length - n, metres: weights?.reduce((sum, weight) => sum + weight, 0) ?? n, weighted: weights !== null,
    mean: null, median: null, cv: null, min: null, max: null, logSd: null, dip: null, dipP: null, dipPText: 'no p', deltaBic: null, populations: null, chosenK: null, mixtures: [], evenOddsPpm: null,
    reasons: [`Not judged: ${message}.`], plot: MISSING_PLOT, histogram: { edgesPpm: [], counts: [] }, notes: [],
  };
}
