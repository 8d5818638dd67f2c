import type { AnalyteSummary } from '#contract/snapshots.ts';
import { QUALIFIER } from '#contract/tables.ts';
import { profilePart, type PartProfile } from '#kernels/compositions/part-profile.ts';
import { screenParts, type PartToScreen } from '#kernels/compositions/screen-parts.ts';
import { sortedAscending } from '#kernels/statistics/sort-ascending.ts';
import type { ColumnStore } from '#server/db/column-store.ts';
import { loadedTable } from './read-rows.ts';

/** What the rows of one analyte tell. */
interface AnalyteFigures extends Pick<AnalyteSummary, 'limitsPpm' | 'medianPpm' | 'maxPpm'> {
  name: string;
  originalUnit: string;
  method: string | null;
  support: 'drill' | 'surface';
  profile: PartProfile;
}

interface Grades {
  values: Float64Array;
  qualifiers: Uint8Array;
}

const DECISIONS = { keep: 'keep', 'keep-with-imputation': 'keep-with-care', drop: 'drop' } as const;
/** Limits told of one analyte, the commonest first. */
const LIMITS = 8;

/** Reads one analyte after the other: of a million rows only one column is held. */
function figuresOf(store: ColumnStore, tableId: number | null, support: 'drill' | 'surface'): AnalyteFigures[] {
  if (tableId === null) return [];
  return loadedTable(store, tableId).analytes().map(({ name, originalUnit, method }) => {
    const grades = { values: store.readNumbers(tableId, name), qualifiers: store.readQualifiers(tableId, name) };
    const profile = profilePart(grades.values, grades.qualifiers);
    return { name, originalUnit, method, support, profile, limitsPpm: limitsOf(grades), ...medianAndMax(grades) };
  });
}

function limitsOf({ values, qualifiers }: Grades): AnalyteSummary['limitsPpm'] {
  const counts = new Map<number, number>();
  qualifiers.forEach((qualifier, row) => {
    const limit = values[row];
    if (qualifier === QUALIFIER.below && limit !== undefined) counts.set(limit, (counts.get(limit) ?? 0) + 1);
  });
  return [...counts].map(([limit, count]) => ({ limit, count })).sort((a, b) => b.count - a.count).slice(0, LIMITS);
}

/** Median and largest of what has a value or a limit; a value below its limit counts at the limit. */
function medianAndMax({ values, qualifiers }: Grades): { medianPpm: number | null; maxPpm: number | null } {
  const known = sortedAscending(values.filter((value, row) => (qualifiers[row] ?? QUALIFIER.missing) <= QUALIFIER.above && !Number.isNaN(value)));
  if (known.length === 0) return { medianPpm: null, maxPpm: null };
  const middle = (known.length - 1) / 2;
  const medianPpm = ((known[Math.floor(middle)] ?? 0) + (known[Math.ceil(middle)] ?? 0)) / 2;
  return { medianPpm, maxPpm: known.at(-1) ?? null };
}

/** Drill assays of this job are four-acid digestions unless the method says otherwise. */
const isOtherDigestion = (method: string | null): boolean => method !== null && /fusion|xrf|fire|combustion|aqua/i.test(method);

const toScreen = ({ name, profile, support, method }: AnalyteFigures): PartToScreen => ({
  element: name, profile, digestion: support === 'drill' && !isOtherDigestion(method) ? 'four-acid' : 'unknown',
});

/** Too few analytes to screen as a composition: each is kept as it is. */
const LEAST_PARTS = 3;

function summariesOf(columns: readonly AnalyteFigures[]): AnalyteSummary[] {
  const parts = columns.map(toScreen);
  const decisions = parts.length < LEAST_PARTS ? [] : screenParts(parts);
  return columns.map((column, place) => {
    const { nRows, nMeasured, nBelow, nAbove, nMissing } = column.profile;
    const nAnalysed = nMeasured + nBelow + nAbove;
    const decision = decisions[place];
    return {
      analyte: column.name, method: column.method, originalUnit: column.originalUnit, n: nAnalysed, missingShare: nRows > 0 ? nMissing / nRows : 0,
      belowShare: nAnalysed > 0 ? nBelow / nAnalysed : 0, aboveShare: nAnalysed > 0 ? nAbove / nAnalysed : 0, limitsPpm: column.limitsPpm, medianPpm: column.medianPpm, maxPpm: column.maxPpm,
      decision: decision ? DECISIONS[decision.decision] : 'keep', reason: decision?.reason ?? 'fewer than three analytes: no log-ratio suite can be made', caution: decision?.cautions.join('; ') || null, supports: [column.support], onSurface: null,
    };
  });
}

/** Sums up each analyte of the assays and the surface samples; one found in both is told by its assays, its surface reading beside them. */
export function summariseAnalytes(store: ColumnStore, assayTableId: number | null, surfaceTableId: number | null): AnalyteSummary[] {
  const drill = summariesOf(figuresOf(store, assayTableId, 'drill'));
  const surface = summariesOf(figuresOf(store, surfaceTableId, 'surface'));
  const names = new Set(drill.map(({ analyte }) => analyte));
  const both = drill.map((summary): AnalyteSummary => {
    const onSurface = surface.find(({ analyte }) => analyte === summary.analyte);
    return onSurface ? { ...summary, supports: [...summary.supports, 'surface'], onSurface } : summary;
  });
  return [...both, ...surface.filter(({ analyte }) => !names.has(analyte))].sort((a, b) => (a.analyte < b.analyte ? -1 : 1));
}
