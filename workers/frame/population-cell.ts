import type { CellDetail } from '#contract/screens.ts';
import { QUALIFIER } from '#contract/tables.ts';
import { normalQuantile } from '#kernels/normal.ts';
import type { AssayColumn } from './snapshot-tables.ts';
import { stopgapScreen } from './screen-stopgap.ts';

export interface PopulationInput {
  subsetKey: string;
  subsetLabel: string;
  variable: string;
  assay: AssayColumn;
  lengthsM: Float64Array;
  /** 1 where a row is in the subset. */
  mask: Uint8Array;
}

/** Screens one variable in one subset for mixed populations. */
export function populationCell({ subsetKey, subsetLabel, variable, assay, lengthsM, mask }: PopulationInput): CellDetail {
  const rows = Array.from(mask.keys()).filter((row) => mask[row] === 1);
  const known = rows.filter((row) => (assay.qualifiers[row] ?? 3) <= QUALIFIER.above && (assay.values[row] ?? 0) > 0);
  const values = Float64Array.from(known, (row) => (assay.qualifiers[row] === QUALIFIER.below ? 0.65 : 1) * (assay.values[row] ?? 0));
  const n = values.length;
  const screened = n >= 3 ? stopgapScreen(values) : null;
  const sorted = Float64Array.from(values).sort();
  const mean = n > 0 ? values.reduce((s, v) => s + v, 0) / n : null;
  const sd = n > 1 && mean !== null ? Math.sqrt(values.reduce((s, v) => s + (v - mean) ** 2, 0) / (n - 1)) : null;
  const step = Math.max(1, Math.ceil(n / 300));
  const places = Array.from(sorted.keys()).filter((i) => i % step === 0 || i < 20 || i >= n - 20);
  const lo = Math.log(sorted[0] ?? 1), hi = Math.log(sorted[n - 1] ?? 2);
  const edges = Array.from({ length: 31 }, (_, i) => Math.exp(lo + ((hi - lo || 1) * i) / 30));
  const counts = new Array<number>(30).fill(0);
  for (const v of values) counts[Math.min(29, Math.floor(((Math.log(v) - lo) / (hi - lo || 1)) * 30))]! += 1;
  return {
    subsetKey, subsetLabel, variable, verdict: screened?.verdict ?? 'too-few', n, mean, median: n > 0 ? (sorted[n >> 1] ?? null) : null, cv: mean && sd !== null ? sd / mean : null,
    dip: screened?.dip ?? null, dipP: screened?.dipP ?? null, dipPText: screened ? `p ${screened.dipP}` : '–', deltaBic: screened?.deltaBic ?? null, populations: screened?.chosenK ?? null,
    metres: rows.reduce((s, r) => s + (lengthsM[r] ?? 0), 0), nBelow: rows.filter((r) => assay.qualifiers[r] === 1).length, nAbove: rows.filter((r) => assay.qualifiers[r] === 2).length, nMissing: rows.length - n,
    min: sorted[0] ?? null, max: sorted[n - 1] ?? null, logSd: screened?.mixtures[0]?.components[0]?.logSd ?? null, weighted: false, mixtures: screened?.mixtures ?? [], chosenK: screened?.chosenK ?? null, evenOddsPpm: null,
    reasons: [], plot: { z: places.map((i) => normalQuantile((i + 0.5) / n)), ppm: places.map((i) => sorted[i] ?? 0), drawnOf: n }, histogram: { edgesPpm: edges, counts }, notes: [],
  };
}
