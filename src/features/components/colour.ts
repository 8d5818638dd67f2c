import { useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import type { Grouping } from '#contract/groupings.ts';
import { FRAME } from '#contract/snapshots.ts';
import type { Category } from '#src/components/charts/chart-types.ts';
import { SLOT_COUNT } from '#src/components/charts/category-marks.tsx';
import { groupingsQuery } from '#src/lib/analysis-queries.ts';
import { categoriesQuery, columnQuery } from '#src/lib/columns.ts';
import type { Frame } from '#src/lib/frame.ts';
import { useDepositId } from '#src/lib/use-deposit.ts';
import type { Colour } from './url.ts';

export interface RowColours {
  categories: readonly Category[];
  category: Float64Array | undefined;
  /** What is not coloured, for the caption. */
  note: string;
}

const NONE: RowColours = { categories: [], category: undefined, note: '' };

/** The grouping whose rows are those of the frame: the one domains stand on before others. */
export function groupingOn(groupings: readonly Grouping[], frameTableId: number): Grouping | null {
  const own = groupings.filter((grouping) => grouping.frameTableId === frameTableId);
  return own.find(({ isActive }) => isActive) ?? own[0] ?? null;
}

/** Colours by a logged category: the codes with most metres take the slots, rarer codes stay plain. */
export function codeColours(codes: Float64Array, dictionary: readonly string[], weight: Float64Array, subject: string): RowColours {
  const metres = dictionary.map(() => 0);
  codes.forEach((code, row) => {
    if (metres[code] !== undefined) metres[code] += weight[row] ?? 0;
  });
  const order = dictionary.map((_word, code) => code).filter((code) => (metres[code] ?? 0) > 0).sort((a, b) => (metres[b] ?? 0) - (metres[a] ?? 0));
  const shown = order.slice(0, SLOT_COUNT);
  const place = new Map(shown.map((code, index) => [code, index]));
  return {
    categories: shown.map((code, index) => ({ label: dictionary[code] ?? '', slot: index + 1 })),
    category: codes.map((code) => place.get(code) ?? NaN),
    note: order.length > shown.length ? `${shown.length} of ${order.length} ${subject} codes coloured` : '',
  };
}

/** Colours of the rows by what the person chose; nothing while it is read or where it is not known. */
export function useRowColours(frame: Frame | undefined, colour: Colour): { colours: RowColours; grouping: Grouping | null } {
  const depositId = useDepositId();
  const { data: groupings } = useQuery(groupingsQuery(depositId));
  const grouping = groupingOn(groupings ?? [], frame?.tableId ?? 0);
  const isCode = colour !== 'group' && colour !== 'none';
  const name = colour === 'group' || colour === 'none' ? FRAME.lithology : FRAME[colour];
  const { data: codes } = useQuery({ ...categoriesQuery(depositId, frame?.tableId ?? 0, name), enabled: frame !== undefined && isCode });
  const { data: label } = useQuery({ ...columnQuery(depositId, grouping?.tableId ?? 0, 'group'), enabled: grouping !== null && colour === 'group' });
  const colours = useMemo((): RowColours => {
    if (frame === undefined || colour === 'none') return NONE;
    if (colour === 'group') return grouping && label ? groupColours(grouping, label) : NONE;
    return codes ? codeColours(codes.codes, codes.dictionary, frame.weight, colour) : NONE;
  }, [frame, colour, grouping, label, codes]);
  return { colours, grouping };
}

function groupColours({ groups }: Grouping, label: Float64Array): RowColours {
  const place = new Map(groups.map((group, index) => [group.label, index]));
  return { categories: groups.map(({ name, slot }) => ({ label: name, slot })), category: label.map((own) => place.get(own) ?? NaN), note: '' };
}
