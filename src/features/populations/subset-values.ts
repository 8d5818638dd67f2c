import { useQueries, useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import type { Grouping } from '#contract/groupings.ts';
import type { Subset } from '#contract/screens.ts';
import { FRAME, type Snapshot } from '#contract/snapshots.ts';
import { QUALIFIER } from '#contract/tables.ts';
import { categoriesQuery, columnQuery, qualifiersQuery } from '#src/lib/columns.ts';

/** Grades of one variable in one subset, with the row of the frame each stands in. */
export interface SubsetValues {
  /** ppm, measured and above their limit only. */
  ppm: Float64Array;
  rows: Int32Array;
  /** Metres of each; null for surface samples, which count one each. */
  weights: Float64Array | null;
  /** Share of the subset's grades that lie below detection. */
  belowShare: number;
}

interface Wanted {
  depositId: number;
  snapshot: Snapshot | null;
  support: 'drill' | 'surface';
  grouping: Grouping | null;
  subset: Subset | null;
  variable: string | null;
}

/** Where a variable's column is kept, and the row of the frame its first value stands in. */
function placeOf({ snapshot, support }: Wanted): { tableId: number; firstRow: number } | null {
  if (!snapshot) return null;
  const tableId = support === 'drill' ? snapshot.assayTableId : snapshot.surfaceTableId;
  const firstRow = support === 'drill' ? 0 : snapshot.rows - snapshot.surfaceRows;
  return tableId === null ? null : { tableId, firstRow };
}

/** Tells of each row of the frame whether it lies in the subset; null while that is being read. */
function useMembership({ depositId, snapshot, grouping, subset }: Wanted): ((row: number) => boolean) | null {
  const kind = subset?.kind;
  const groups = useQuery({
    ...columnQuery(depositId, grouping?.tableId ?? 0, 'group'),
    enabled: kind === 'group' && grouping !== null,
  }).data;
  const category = kind === 'weathering' ? FRAME.weathering : FRAME.lithology;
  const logged = useQuery({
    ...categoriesQuery(depositId, snapshot?.frameTableId ?? 0, category),
    enabled: (kind === 'lithology' || kind === 'weathering') && snapshot !== null,
  }).data;
  return useMemo(() => {
    if (!subset) return null;
    const level = subset.key.slice(subset.key.indexOf(':') + 1);
    if (subset.kind === 'all') return () => true;
    if (subset.kind === 'group') return groups ? (row: number) => groups[row] === Number(level) : null;
    const code = logged?.dictionary.indexOf(level) ?? -1;
    return logged ? (row: number) => logged.codes[row] === code : null;
  }, [subset, groups, logged]);
}

/** The very values behind one cell, so that it can be drawn at any size and its points found in the ground. */
export function useSubsetValues(wanted: Wanted): SubsetValues | null {
  const { depositId, variable } = wanted;
  const place = placeOf(wanted);
  const isIn = useMembership(wanted);
  const enabled = place !== null && variable !== null;
  const [values, qualifiers] = useQueries({
    queries: [
      { ...columnQuery(depositId, place?.tableId ?? 0, variable ?? ''), enabled },
      { ...qualifiersQuery(depositId, place?.tableId ?? 0, variable ?? ''), enabled },
    ],
  }).map(({ data }) => data);
  const firstRow = place?.firstRow ?? 0;
  const { snapshot, support } = wanted;
  const lengths = useQuery({ ...columnQuery(depositId, snapshot?.frameTableId ?? 0, FRAME.length), enabled: snapshot !== null }).data;
  return useMemo(() => {
    if (!values || !qualifiers || !isIn || !lengths) return null;
    const ppm: number[] = [];
    const rows: number[] = [];
    let [below, total] = [0, 0];
    values.forEach((value, i) => {
      const qualifier = qualifiers[i] ?? QUALIFIER.missing;
      if (!isIn(firstRow + i) || qualifier > QUALIFIER.above) return;
      const metres = support === 'drill' ? (lengths[firstRow + i] ?? 0) : 1;
      total += metres;
      if (qualifier === QUALIFIER.below) below += metres;
      else if (value > 0) {
        ppm.push(value);
        rows.push(firstRow + i);
      }
    });
    const weights = support === 'drill' ? Float64Array.from(rows, (row) => lengths[row] ?? 0) : null;
    return { ppm: Float64Array.from(ppm), rows: Int32Array.from(rows), weights, belowShare: total > 0 ? below / total : 0 };
  }, [values, qualifiers, isIn, firstRow, lengths, support]);
}
