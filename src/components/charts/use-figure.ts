import { useState } from 'react';
import type { ChartHandle } from './chart-types.ts';

interface Figure {
  /** For the chart: `chartRef={figure.ref}`. */
  ref: (handle: ChartHandle | null) => void;
  /** For the export: `figureExports(figure.drawn, …)`. */
  drawn: () => ChartHandle | null;
}

function makeFigure(): Figure {
  let handle: ChartHandle | null = null;
  return { ref: (next) => void (handle = next), drawn: () => handle };
}

/** Joins a chart to the download menu of its plate, without drawing again when the chart changes. */
export function useFigure(): Figure {
  return useState(makeFigure)[0];
}
