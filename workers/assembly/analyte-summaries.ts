import type { AnalyteSummary } from '#contract/snapshots.ts';
import { QUALIFIER } from '#contract/tables.ts';
import { profilePart } from '#kernels/compositions/part-profile.ts';
import { screenParts, type PartToScreen } from '#kernels/compositions/screen-parts.ts';
import type { ColumnStore } from '#server/db/column-store.ts';
import { loadedTable } from './read-rows.ts';

interface AnalyteColumn {
  name: string;
  originalUnit: string;
  method: string | null;
  values: Float64Array;
  qualifiers: Uint8Array;
  support: 'drill' | 'surface';
}

const DECISIONS = { keep: 'keep', 'keep-with-imputation': 'keep-with-care', drop: 'drop' } as const;
/** Limits told of one analyte, the commonest first. */
const LIMITS = 8;

function columnsOf(store: ColumnStore, tableId: number | null, support: 'drill' | 'surface'): AnalyteColumn[] {
  if (tableId === null) return [];
  return loadedTable(store, tableId).analytes().map(({ name, originalUnit, method }) => ({
    name, originalUnit, method, support, values: store.readNumbers(tableId, name), qualifiers: store.readQualifiers(tableId, name),
  }));
}

function limitsOf({ values, qualifiers }: AnalyteColumn): AnalyteSummary['limitsPpm'] {
  const counts = new Map<number, number>();
  qualifiers.forEach((qualifier, row) => {
    const limit = values[row];
    if (qualifier === QUALIFIER.below && limit !== undefined) counts.set(limit, (counts.get(limit) ?? 0) + 1);
  });
  return [...counts].map(([limit, count]) => ({ limit, count })).sort((a, b) => b.count - a.count).slice(0, LIMITS);
}

/** Median and largest of what has a value or a limit; a value below its limit counts at the limit. */
function medianAndMax({ values, qualifiers }: AnalyteColumn): { medianPpm: number | null; maxPpm: number | null } {
  const known = values.filter((value, row) => (qualifiers[row] ?? QUALIFIER.missing) <= QUALIFIER.above && !Number.isNaN(value)).sort();
  if (known.length === 0) return { medianPpm: null, maxPpm: null };
  const middle = (known.length - 1) / 2;
  const medianPpm = ((known[Math.floor(middle)] ?? 0) + (known[Math.ceil(middle)] ?? 0)) / 2;
  return { medianPpm, maxPpm: known.at(-1) ?? null };
}

/** Drill assays of this job are four-acid digestions unless the method says otherwise. */
const isOtherDigestion = (method: string | null): boolean => method !== null && /fusion|xrf|fire|combustion|aqua/i.test(method);

const toScreen = (column: AnalyteColumn): PartToScreen => ({
  element: column.name, profile: profilePart(column.values, column.qualifiers), digestion: column.support === 'drill' && !isOtherDigestion(column.method) ? 'four-acid' : 'unknown',
});

/** Too few analytes to screen as a composition: each is kept as it is. */
const LEAST_PARTS = 3;

function summariesOf(columns: readonly AnalyteColumn[]): AnalyteSummary[] {
  const parts = columns.map(toScreen);
  const decisions = parts.length < LEAST_PARTS ? [] : screenParts(parts);
  return columns.map((column, place) => {
    const { nRows, nMeasured, nBelow, nAbove, nMissing } = parts[place]?.profile ?? { nRows: 0, nMeasured: 0, nBelow: 0, nAbove: 0, nMissing: 0 };
    const nAnalysed = nMeasured + nBelow + nAbove;
    const decision = decisions[place];
    return {
      analyte: column.name, method: column.method, originalUnit: column.originalUnit, n: nAnalysed, missingShare: nRows > 0 ? nMissing / nRows : 0,
      belowShare: nAnalysed > 0 ? nBelow / nAnalysed : 0, aboveShare: nAnalysed > 0 ? nAbove / nAnalysed : 0, limitsPpm: limitsOf(column), ...medianAndMax(column),
      decision: decision ? DECISIONS[decision.decision] : 'keep', reason: decision?.reason ?? 'fewer than three analytes: no log-ratio suite can be made', caution: decision?.cautions.join('; ') || null, supports: [column.support], onSurface: null,
    };
  });
}

/** Sums up each analyte of the assays and the surface samples; one found in both is told by its assays, its surface reading beside them. */
export function summariseAnalytes(store: ColumnStore, assayTableId: number | null, surfaceTableId: number | null): AnalyteSummary[] {
  const drill = summariesOf(columnsOf(store, assayTableId, 'drill'));
  const surface = summariesOf(columnsOf(store, surfaceTableId, 'surface'));
  const names = new Set(drill.map(({ analyte }) => analyte));
  const both = drill.map((summary): AnalyteSummary => {
    const onSurface = surface.find(({ analyte }) => analyte === summary.analyte);
    return onSurface ? { ...summary, supports: [...summary.supports, 'surface'], onSurface } : summary;
  });
  return [...both, ...surface.filter(({ analyte }) => !names.has(analyte))].sort((a, b) => (a.analyte < b.analyte ? -1 : 1));
}
