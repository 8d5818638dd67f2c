import { queryOptions, type QueryClient } from '@tanstack/react-query';
import { FRAME } from '#contract/snapshots.ts';
import { categoriesQuery, columnQuery } from './columns.ts';

/** Rows of one hole in the frame: from `start` up to, not including, `end`, down the hole. */
export interface RowRange {
  start: number;
  end: number;
}

/** What every analysis page asks of the frame: which hole a row lies in, from where to where. */
export interface Frame {
  tableId: number;
  nRows: number;
  /** Names in the order of their rows. */
  holes: readonly string[];
  rangeOf: ReadonlyMap<string, RowRange>;
  /** Null for a surface sample. */
  holeAt: (row: number) => string | null;
  fromM: Float64Array;
  toM: Float64Array;
  /** Metres of an interval, 1 for a surface sample. */
  weight: Float64Array;
}

interface FrameColumns {
  codes: Float64Array;
  dictionary: readonly string[];
  fromM: Float64Array;
  toM: Float64Array;
  weight: Float64Array;
}

/** Finds where each hole starts and ends among the rows; its rows lie together. */
export function makeFrame(
  tableId: number,
  { codes, dictionary, fromM, toM, weight }: FrameColumns,
): Frame {
  const rangeOf = new Map<string, RowRange>();
  for (let row = 0; row < codes.length; row++) {
    const name = dictionary[codes[row] ?? NaN];
    if (name === undefined) continue;
    const range = rangeOf.get(name);
    if (range === undefined) rangeOf.set(name, { start: row, end: row + 1 });
    else range.end = row + 1;
  }
  const holeAt = (row: number): string | null => dictionary[codes[row] ?? NaN] ?? null;
  return {
    tableId,
    nRows: codes.length,
    holes: [...rangeOf.keys()],
    rangeOf,
    holeAt,
    fromM,
    toM,
    weight,
  };
}

async function readFrame(client: QueryClient, depositId: number, tableId: number): Promise<Frame> {
  const column = (name: string) => client.ensureQueryData(columnQuery(depositId, tableId, name));
  const [{ codes, dictionary }, fromM, toM, weight] = await Promise.all([
    client.ensureQueryData(categoriesQuery(depositId, tableId, FRAME.hole)),
    column(FRAME.from),
    column(FRAME.to),
    column(FRAME.length),
  ]);
  return makeFrame(tableId, { codes, dictionary, fromM, toM, weight });
}

export const frameQuery = (depositId: number, frameTableId: number) =>
  queryOptions({
    queryKey: ['tables', depositId, frameTableId, 'frame'],
    queryFn: ({ client }) => readFrame(client, depositId, frameTableId),
    staleTime: Infinity,
    gcTime: 30 * 60_000,
    structuralSharing: false,
  });
