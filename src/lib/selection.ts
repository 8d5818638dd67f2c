import { useEffect } from 'react';
import { createStore, useStore } from './store.ts';

/** Rows of the frame that are taken, in every plot, table and the tray at once. */
export interface Selection {
  /** Frame row indices, ascending. */
  readonly rows: Int32Array;
  /** How they were taken, in words: "drawn by lasso". */
  readonly source: string;
  has(row: number): boolean;
}

export type TakeMode = 'replace' | 'add' | 'remove';

function makeSelection(taken: ReadonlySet<number>, source: string): Selection {
  const rows = Int32Array.from(taken).sort();
  return { rows, source, has: (row) => taken.has(row) };
}

const NOTHING = makeSelection(new Set(), '');
const selectionStore = createStore<Selection>(NOTHING);
const hoverStore = createStore<number | null>(null);
let frameKey = '';

/** Takes rows; `add` and `remove` work on what is taken already. An empty result clears. */
export function takeRows(rows: Iterable<number>, source: string, mode: TakeMode = 'replace'): void {
  const taken = new Set<number>(mode === 'replace' ? [] : selectionStore.get().rows);
  for (const row of rows) {
    if (mode === 'remove') taken.delete(row);
    else taken.add(row);
  }
  selectionStore.set(taken.size === 0 ? NOTHING : makeSelection(taken, source));
}

export function clearSelection(): void {
  selectionStore.set(NOTHING);
}

/** Row numbers mean something within one frame only: another frame starts with nothing taken. */
export function enterFrame(key: string): void {
  if (frameKey === key) return;
  frameKey = key;
  selectionStore.set(NOTHING);
  hoverStore.set(null);
}

export const useSelectionFrame = (key: string): void => useEffect(() => enterFrame(key), [key]);

export const currentSelection = (): Selection => selectionStore.get();
export const useSelection = (): Selection => useStore(selectionStore);
export const onSelectionChange = (listener: () => void): (() => void) =>
  selectionStore.subscribe(listener);

/** The row under the pointer, lit in every plot. */
export const hoverRow = (row: number | null): void => hoverStore.set(row);
export const hoveredRow = (): number | null => hoverStore.get();
export const useHoveredRow = (): number | null => useStore(hoverStore);
export const onHoverChange = (listener: () => void): (() => void) => hoverStore.subscribe(listener);

/** One byte a row, 1 where taken: what canvas drawing reads. */
export function selectionMask(selection: Selection, rowCount: number): Uint8Array {
  const mask = new Uint8Array(rowCount);
  for (const row of selection.rows) if (row < rowCount) mask[row] = 1;
  return mask;
}
