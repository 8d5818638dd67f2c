import { useEffect, useState } from 'react';
import type { PointerEvent } from 'react';
import { selectMode } from './chart-types.ts';
import type { SelectMode } from './chart-types.ts';
import { boxPolygon } from './scatter-points.ts';
import type { ScatterTool } from './scatter-tools.tsx';

type Point = [number, number];

interface Options {
  tool: ScatterTool;
  /** A finished lasso or box, in pixels of the chart. */
  onPolygon: (polygon: Point[], mode: SelectMode) => void;
  /** A click without a drag. */
  onClick: (at: Point, mode: SelectMode) => void;
  onMove: (at: Point | null) => void;
}

const CLICK_PX = 4;

/** Where the pointer is, in pixels of the positioned box it moves over. */
export function pointIn(event: PointerEvent<HTMLElement>, offset: { left: number; top: number }): Point {
  const rect = event.currentTarget.getBoundingClientRect();
  return [event.clientX - rect.left + offset.left, event.clientY - rect.top + offset.top];
}

/** Thins a trail of points, so that a long lasso stays cheap. */
export function addToTrail(trail: readonly Point[], next: Point): Point[] {
  const last = trail.at(-1);
  return last !== undefined && Math.hypot(next[0] - last[0], next[1] - last[1]) < 3 ? [...trail] : [...trail, next];
}

/** Lasso and box by pointer; Escape drops a drag under way. */
export function useScatterGesture({ tool, onPolygon, onClick, onMove }: Options, offset: { left: number; top: number }) {
  const [trail, setTrail] = useState<Point[]>([]);
  const dragging = trail.length > 0;
  useEffect(() => {
    if (!dragging) return undefined;
    const drop = (event: KeyboardEvent) => {
      if (event.key === 'Escape') setTrail([]);
    };
    addEventListener('keydown', drop);
    return () => removeEventListener('keydown', drop);
  }, [dragging]);

  const start = trail[0];
  const end = trail.at(-1);
  const outline = (upTo: Point | undefined): Point[] => {
    if (tool !== 'box') return trail;
    return start === undefined || upTo === undefined ? [] : boxPolygon(start, upTo);
  };
  return {
    outline: outline(end),
    handlers: {
      onPointerDown: (event: PointerEvent<HTMLElement>) => {
        if (event.button !== 0 || tool === 'pan') return;
        event.currentTarget.setPointerCapture?.(event.pointerId);
        setTrail([pointIn(event, offset)]);
      },
      onPointerMove: (event: PointerEvent<HTMLElement>) => {
        const at = pointIn(event, offset);
        if (dragging) setTrail(addToTrail(trail, at));
        else onMove(at);
      },
      onPointerUp: (event: PointerEvent<HTMLElement>) => {
        if (start === undefined) return;
        const at = pointIn(event, offset);
        const spread = Math.max(...[...trail, at].map(([x, y]) => Math.hypot(x - start[0], y - start[1])));
        if (spread < CLICK_PX) onClick(at, selectMode(event));
        else onPolygon(outline(at), selectMode(event));
        setTrail([]);
      },
      onPointerCancel: () => setTrail([]),
      onPointerLeave: () => onMove(null),
    },
  };
}
