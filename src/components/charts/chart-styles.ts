import type { CSSProperties } from 'react';

/** Pixel sizes, because the layout of a chart is worked out in pixels. */
export const TICK_PX = 11;
export const LABEL_PX = 12;

export const tickText: CSSProperties = {
  font: `400 ${TICK_PX}px var(--font-ui)`,
  fill: 'var(--ink-3)',
  fontVariantNumeric: 'tabular-nums',
};

export const axisTitle: CSSProperties = {
  font: `400 ${LABEL_PX}px var(--font-ui)`,
  fill: 'var(--ink-2)',
};

export const strongLabel: CSSProperties = {
  font: `600 ${LABEL_PX}px var(--font-ui)`,
  fill: 'var(--ink)',
};

export const captionText: CSSProperties = {
  font: `400 ${LABEL_PX}px var(--font-ui)`,
  fill: 'var(--ink-3)',
};

export const codeText: CSSProperties = {
  font: `600 ${TICK_PX}px var(--font-mono)`,
  fill: 'var(--ink)',
};

/** A halo of the sheet, so that a label stays readable over marks. */
export const halo: CSSProperties = {
  paintOrder: 'stroke',
  stroke: 'var(--sheet)',
  strokeWidth: 3.5,
  strokeLinejoin: 'round',
};
