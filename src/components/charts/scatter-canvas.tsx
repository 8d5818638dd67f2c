import { useEffect, useRef } from 'react';
import { isPicked } from './chart-types.ts';
import type { PickedRows } from './chart-types.ts';
import { dotColours, drawingOf, makeSprites, paintDots, stampMarks } from './scatter-paint.ts';
import type { SlotOf } from './scatter-paint.ts';
import type { IsShown, Projector, ScatterPoints } from './scatter-points.ts';
import { useThemeKey } from './theme-colours.ts';

export interface ScatterLayer {
  points: ScatterPoints;
  view: Projector;
  slotOf: SlotOf;
  slots: readonly number[];
  isShown: IsShown;
  picked: PickedRows | undefined;
}

/** Marks wait until the view has rested this long; dots follow at once. */
const REST_MS = 120;
const ratioNow = () => Math.min(2, typeof devicePixelRatio === 'number' ? devicePixelRatio : 1);

function prepare(canvas: HTMLCanvasElement | null, view: Projector, ratio: number): CanvasRenderingContext2D | null {
  if (canvas === null) return null;
  canvas.width = Math.max(1, Math.round(view.area.width * ratio));
  canvas.height = Math.max(1, Math.round(view.area.height * ratio));
  return canvas.getContext('2d');
}

function paintAll(canvas: HTMLCanvasElement | null, layer: ScatterLayer): (() => void) | undefined {
  const ratio = ratioNow();
  const pen = prepare(canvas, layer.view, ratio);
  if (pen === null) return undefined;
  const { points, view, slotOf, slots, isShown } = layer;
  const { dots, every } = drawingOf(points.rows.length);
  const stamp = () => stampMarks(pen, { points, view, slotOf, takes: (row, i) => i % every === 0 && isShown(row) }, makeSprites(slots, ratio), false);
  if (!dots) {
    stamp();
    return undefined;
  }
  const colours = dotColours(slots);
  const grey = colours.get(0) ?? [128, 128, 128];
  paintDots(pen, { points, view, slotOf, takes: isShown }, (row) => colours.get(slotOf(row)) ?? grey, { sizePx: 1.5, alpha: 0.45, ratio });
  const timer = setTimeout(stamp, REST_MS);
  return () => clearTimeout(timer);
}

function paintPicked(canvas: HTMLCanvasElement | null, layer: ScatterLayer): void {
  const ratio = ratioNow();
  const pen = prepare(canvas, layer.view, ratio);
  if (pen === null || layer.picked === undefined) return;
  const { points, view, slotOf, slots, isShown, picked } = layer;
  const takes = (row: number) => isPicked(picked, row) && isShown(row);
  let count = 0;
  for (const row of points.rows) if (takes(row)) count++;
  if (drawingOf(count).dots) {
    const colours = dotColours(slots);
    const ink = dotColours([]).get(0) ?? [0, 0, 0];
    paintDots(pen, { points, view, slotOf, takes }, () => ink, { sizePx: 3, alpha: 0.9, ratio });
    paintDots(pen, { points, view, slotOf, takes }, (row) => colours.get(slotOf(row)) ?? ink, { sizePx: 1.5, alpha: 1, ratio });
    return;
  }
  stampMarks(pen, { points, view, slotOf, takes }, makeSprites(slots, ratio), true);
}

/** Two canvases over the plot area: all points, and the chosen ones on top. */
export function ScatterCanvas({ layer }: { layer: ScatterLayer }) {
  const { points, view, slotOf, slots, isShown, picked } = layer;
  const base = useRef<HTMLCanvasElement>(null);
  const top = useRef<HTMLCanvasElement>(null);
  const theme = useThemeKey();
  useEffect(
    () => paintAll(base.current, { points, view, slotOf, slots, isShown, picked: undefined }),
    [points, view, slotOf, slots, isShown, theme],
  );
  useEffect(
    () => paintPicked(top.current, { points, view, slotOf, slots, isShown, picked }),
    [points, view, slotOf, slots, isShown, picked, theme],
  );
  const { left, top: topPx, width, height } = view.area;
  const place = { left, top: topPx, width, height };
  return (
    <>
      <canvas ref={base} aria-hidden="true" className="absolute" style={place} />
      <canvas ref={top} aria-hidden="true" className="absolute" style={place} />
    </>
  );
}
