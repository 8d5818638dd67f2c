import type { CSSProperties } from 'react';

/** Pixel sizes, because the layout of a chart is worked out in pixels. */
export const TICK_PX = 11;
export const LABEL_PX = 12;

/** Longhands only: a shorthand that holds a token is lost when a style is written out for an export. */
export function type(family: 'ui' | 'mono', weight: 400 | 500 | 600, sizePx: number): CSSProperties {
  return { fontFamily: `var(--font-${family})`, fontWeight: weight, fontSize: sizePx };
}

export const tickText: CSSProperties = {
  ...type('ui', 400, TICK_PX),
  fill: 'var(--ink-3)',
  fontVariantNumeric: 'tabular-nums',
};

export const axisTitle: CSSProperties = {
  ...type('ui', 400, LABEL_PX),
  fill: 'var(--ink-2)',
};

export const strongLabel: CSSProperties = {
  ...type('ui', 600, LABEL_PX),
  fill: 'var(--ink)',
};

export const captionText: CSSProperties = {
  ...type('ui', 400, LABEL_PX),
  fill: 'var(--ink-3)',
};

export const codeText: CSSProperties = {
  ...type('mono', 600, TICK_PX),
  fill: 'var(--ink)',
};

/** A halo of the sheet, so that a label stays readable over marks. */
export const halo: CSSProperties = {
  paintOrder: 'stroke',
  stroke: 'var(--sheet)',
  strokeWidth: 3.5,
  strokeLinejoin: 'round',
};
