import { FRAME, sideColumn } from '#contract/snapshots.ts';
import type { Category } from '#kernels/tables/category.ts';
import type { ColumnStore } from '#server/db/column-store.ts';
import { holeStartsOf } from '#workers/frame/hole-starts.ts';
import { ofSupport, readFrameCategory, readLengths, supportRange, type SnapshotTables, type Support } from '#workers/frame/snapshot-tables.ts';

export interface LoggedColumn {
  name: string;
  logged: Category;
}

/** The rows of a support as evidence looks at them, read once for all domains. */
export interface DomainRows {
  groups: Float64Array;
  membership: Float64Array;
  lengthsM: Float64Array;
  holeNames: string[];
  holeCodes: Float64Array;
  fromM: Float64Array;
  toM: Float64Array;
  /** Null for surface samples. */
  holeStarts: Int32Array | null;
  categories: LoggedColumn[];
}

function asCategory({ codes, dictionary }: { codes: Float64Array; dictionary: string[] }): Category {
  return { levels: dictionary, codes: Int32Array.from(codes, (code) => (Number.isNaN(code) ? -1 : code)) };
}

export function readDomainRows(store: ColumnStore, tables: SnapshotTables, support: Support, groupingTableId: number, faults: readonly string[]): DomainRows {
  const range = supportRange(tables, support);
  const hole = readFrameCategory(store, tables, support, FRAME.hole);
  const names = [FRAME.lithology, FRAME.weathering, ...faults.map(sideColumn)];
  return {
    groups: ofSupport(store, groupingTableId, 'group', tables, support),
    membership: ofSupport(store, groupingTableId, 'membership', tables, support),
    lengthsM: readLengths(store, tables, support),
    holeNames: hole.dictionary,
    holeCodes: hole.codes,
    fromM: store.readNumbers(tables.frameTableId, FRAME.from, range),
    toM: store.readNumbers(tables.frameTableId, FRAME.to, range),
    holeStarts: support === 'drill' ? holeStartsOf(hole.codes) : null,
    categories: names.map((name) => ({ name, logged: asCategory(readFrameCategory(store, tables, support, name)) })),
  };
}

/** 1 where a row's group is one of the domain's. */
export const inDomainMask = ({ groups }: DomainRows, labels: readonly number[]): Uint8Array => Uint8Array.from(groups, (group) => (labels.includes(group) ? 1 : 0));

/** Finds the row that holds a depth of a hole; −1 where none does. */
export function rowFinder({ holeNames, holeCodes, holeStarts, fromM, toM }: DomainRows): (hole: string, depthM: number) => number {
  if (!holeStarts) return () => -1;
  const startOf = new Map(Array.from(holeStarts.subarray(0, -1), (start, i): [string, [number, number]] => [holeNames[holeCodes[start] ?? -1] ?? '', [start, holeStarts[i + 1] ?? start]]));
  return (hole, depthM) => {
    const [start, end] = startOf.get(hole) ?? [0, 0];
    let [low, high] = [start, end];
    while (low < high) {
      const middle = (low + high) >> 1;
      if ((toM[middle] ?? 0) <= depthM) low = middle + 1;
      else high = middle;
    }
    return low < end && (fromM[low] ?? Infinity) <= depthM ? low : -1;
  };
}

/** Runs of touching rows inside the domain, hole by hole, and how many holes it is met in. */
export function runsOf({ holeCodes, fromM, toM, lengthsM }: DomainRows, mask: Uint8Array): { runs: number; meanRunM: number; holes: number } {
  let [runs, metres] = [0, 0];
  const holes = new Set<number>();
  mask.forEach((isIn, row) => {
    if (isIn === 0) return;
    metres += lengthsM[row] ?? 0;
    holes.add(holeCodes[row] ?? Number.NaN);
    const continues = row > 0 && mask[row - 1] === 1 && holeCodes[row - 1] === holeCodes[row] && Math.abs((toM[row - 1] ?? 0) - (fromM[row] ?? 0)) < 0.01;
    if (!continues) runs += 1;
  });
  return { runs, meanRunM: runs > 0 ? metres / runs : 0, holes: holes.size };
}
