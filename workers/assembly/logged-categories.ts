import type { CodeMetres } from '#contract/snapshots.ts';
import type { LoggedInterval } from '#contract/holes.ts';
import { transferCategory } from '#kernels/intervals/transfer-category.ts';
import type { DrillRows } from './drill-rows.ts';
import { rowsByHole, type LoadedTable } from './read-rows.ts';

/** A logged table brought onto the assay intervals. */
export interface LoggedCategory {
  /** Places in `dictionary`, NaN where nothing is logged. */
  codes: Float64Array;
  dominance: Float64Array;
  dictionary: string[];
  intervalsOf(hole: string): LoggedInterval[];
  metres: number;
}

export const NOTHING_LOGGED = (nRows: number): LoggedCategory => ({
  codes: new Float64Array(nRows).fill(Number.NaN), dominance: new Float64Array(nRows).fill(Number.NaN), dictionary: [], intervalsOf: () => [], metres: 0,
});

/** Brings logged codes onto assay intervals by the longest overlapped length, hole by hole. */
export function logOntoIntervals(table: LoadedTable, drill: DrillRows): LoggedCategory {
  const texts = table.texts('code');
  const [fromM, toM] = [table.numbers('from'), table.numbers('to')];
  const dictionary = [...new Set(texts)].filter((text) => text !== '').sort();
  const placeOf = new Map(dictionary.map((text, place) => [text, place]));
  const codeOfRow = Int32Array.from(texts, (text) => placeOf.get(text) ?? -1);
  const logged = NOTHING_LOGGED(drill.hole.length);
  const runs = rowsByHole(table.texts('hole'));
  for (const [hole, { first, count }] of drill.runs) {
    const log = runs.get(hole);
    if (!log) continue;
    const end = log.first + log.count;
    const transferred = transferCategory(
      { fromM: drill.fromM.subarray(first, first + count), toM: drill.toM.subarray(first, first + count) },
      { fromM: fromM.subarray(log.first, end), toM: toM.subarray(log.first, end), code: codeOfRow.subarray(log.first, end) },
    );
    for (let i = 0; i < count; i++) {
      const code = transferred.code[i] ?? -1;
      logged.codes[first + i] = code < 0 ? Number.NaN : code;
      logged.dominance[first + i] = transferred.dominance[i] || Number.NaN;
    }
  }
  const intervalsOf = (hole: string): LoggedInterval[] => {
    const log = runs.get(hole);
    if (!log) return [];
    return Array.from({ length: log.count }, (_, i) => ({ fromM: fromM[log.first + i] ?? 0, toM: toM[log.first + i] ?? 0, code: texts[log.first + i] ?? '' }));
  };
  return { ...logged, dictionary, intervalsOf, metres: toM.reduce((sum, to, i) => sum + to - (fromM[i] ?? to), 0) };
}

/** Metres and intervals of each code over rows with lengths, largest first. */
export function codeMetres(codes: Float64Array, dictionary: readonly string[], lengths: Float64Array): CodeMetres[] {
  const sums = dictionary.map((code) => ({ code, metres: 0, intervals: 0 }));
  codes.forEach((code, row) => {
    const entry = sums[code];
    if (!entry) return;
    entry.metres += lengths[row] ?? 0;
    entry.intervals += 1;
  });
  return sums.filter(({ intervals }) => intervals > 0).sort((a, b) => b.metres - a.metres);
}
