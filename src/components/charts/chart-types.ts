import type { ReactNode, Ref } from 'react';

/** A group, domain or any other class shown by colour and mark. Slots run from 1 to 16. */
export interface Category {
  label: string;
  slot: number;
}

/** The numbers behind a picture, read out to people who cannot see it. */
export interface ChartTable {
  caption: string;
  columns: readonly string[];
  rows: readonly (readonly (string | number)[])[];
}

/** What an export button needs from a chart. */
export interface ChartHandle {
  /** The live drawing, or null before it is mounted. */
  svg: () => SVGSVGElement | null;
  /** A self-contained SVG document: colours resolved, fonts embedded, caption written below. */
  toSvg: (caption?: string) => Promise<string>;
  /** The same picture as a PNG; `scale` 2 doubles the pixels. */
  toPng: (caption?: string, scale?: number) => Promise<Blob>;
}

/** Props every chart takes. */
export interface ChartBasics {
  /** Name of the picture, for screen readers and the export. */
  title: string;
  /** One sentence: what the picture shows and what it says. */
  description: string;
  table?: ChartTable;
  /** Pixels, or 'fill' to take the height of the parent. */
  height?: number | 'fill';
  chartRef?: Ref<ChartHandle>;
}

export interface Box {
  width: number;
  height: number;
}

/** Room for drawing inside the axes, in pixels of the chart. */
export interface PlotArea extends Box {
  left: number;
  top: number;
}

export interface Tick {
  value: number;
  label: string;
}

export type ScaleKind = 'linear' | 'log';

/** Draws up to six lines for the thing under the pointer. */
export type RowTooltip = (row: number) => ReactNode;

/** How a choice joins what is already chosen. */
export type SelectMode = 'replace' | 'add' | 'remove';

/** Shift adds, Alt takes away, neither replaces. */
export function selectMode(event: { shiftKey: boolean; altKey: boolean }): SelectMode {
  if (event.altKey) return 'remove';
  return event.shiftKey ? 'add' : 'replace';
}

/** Rows chosen: a set of row numbers (or anything that knows its rows), or a mask of one byte a row. */
export type PickedRows = { has: (row: number) => boolean } | Uint8Array;

export function isPicked(picked: PickedRows | undefined, row: number): boolean {
  if (picked === undefined) return false;
  return picked instanceof Uint8Array ? picked[row] === 1 : picked.has(row);
}
