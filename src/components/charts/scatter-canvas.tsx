import { useEffect, useRef } from 'react';
import { drawingOf, paintDots, paintPicked, stampMarks } from './scatter-paint.ts';
import type { Painting } from './scatter-paint.ts';
import type { Projector, ScatterPoints } from './scatter-points.ts';
import { useThemeKey } from './theme-colours.ts';

interface Props {
  points: ScatterPoints;
  view: Projector;
  slots: Uint8Array;
  /** Chosen points, by index. */
  picked: Int32Array;
}

/** Where there are dots, marks wait until the view has rested this long. */
const REST_MS = 150;
const ratioNow = () => Math.min(2, typeof devicePixelRatio === 'number' ? devicePixelRatio : 1);

function penOf(canvas: HTMLCanvasElement | null, view: Projector, ratio: number): CanvasRenderingContext2D | null {
  if (canvas === null) return null;
  canvas.width = Math.max(1, Math.round(view.area.width * ratio));
  canvas.height = Math.max(1, Math.round(view.area.height * ratio));
  return canvas.getContext('2d', { willReadFrequently: true });
}

function paintAll(canvas: HTMLCanvasElement | null, painting: Painting): (() => void) | undefined {
  const ratio = ratioNow();
  const pen = penOf(canvas, painting.view, ratio);
  if (pen === null) return undefined;
  const { dots, every } = drawingOf(painting.points.rows.length);
  if (!dots) {
    stampMarks(pen, painting, false, ratio);
    return undefined;
  }
  paintDots(pen, painting, { sizePx: 1.3, ratio });
  const timer = setTimeout(() => stampMarks(pen, { ...painting, every }, false, ratio), REST_MS);
  return () => clearTimeout(timer);
}

/** Two canvases over the plot area: all points, and the chosen ones on top. */
export function ScatterCanvas({ points, view, slots, picked }: Props) {
  const base = useRef<HTMLCanvasElement>(null);
  const top = useRef<HTMLCanvasElement>(null);
  const theme = useThemeKey();
  useEffect(() => paintAll(base.current, { points, view, slots }), [points, view, slots, theme]);
  useEffect(() => {
    const ratio = ratioNow();
    const pen = penOf(top.current, view, ratio);
    if (pen !== null && picked.length > 0) paintPicked(pen, { points, view, slots }, picked, ratio);
  }, [points, view, slots, picked, theme]);
  const { left, top: topPx, width, height } = view.area;
  const place = { left, top: topPx, width, height };
  return (
    <>
      <canvas ref={base} aria-hidden="true" className="absolute" style={place} />
      <canvas ref={top} aria-hidden="true" className="absolute" style={place} />
    </>
  );
}
