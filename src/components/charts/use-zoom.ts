import { select, zoom, zoomIdentity } from 'd3';
import type { D3ZoomEvent, Selection, ZoomBehavior, ZoomTransform } from 'd3';
import { useCallback, useEffect, useRef, useState } from 'react';
import type { KeyboardEvent } from 'react';

type Chosen = Selection<HTMLDivElement, unknown, null, undefined>;

interface Options {
  width: number;
  height: number;
  /** Dragging pans and the plain wheel zooms; else only the wheel with Ctrl does. */
  panning: boolean;
  most?: number;
  least?: number;
}

export interface Zoom {
  transform: ZoomTransform;
  /** Put on the element that takes the pointer. */
  attach: (node: HTMLDivElement | null) => (() => void) | undefined;
  by: (factor: number) => void;
  reset: () => void;
  /** + and − zoom, arrows pan, 0 fits. Returns true where the key was used. */
  onKey: (event: KeyboardEvent) => boolean;
}

const PAN_STEP_PX = 40;
const ARROWS: Record<string, readonly [number, number]> = {
  ArrowLeft: [PAN_STEP_PX, 0],
  ArrowRight: [-PAN_STEP_PX, 0],
  ArrowUp: [0, PAN_STEP_PX],
  ArrowDown: [0, -PAN_STEP_PX],
};

/** Pan and zoom of one drawing by pointer, wheel, touch and keys. */
export function useZoom({ width, height, panning, most = 60, least = 0.7 }: Options): Zoom {
  const [transform, setTransform] = useState<ZoomTransform>(zoomIdentity);
  const state = useRef({ width, height, panning });
  const held = useRef<{ node: HTMLDivElement; behaviour: ZoomBehavior<HTMLDivElement, unknown> } | null>(null);
  useEffect(() => {
    state.current = { width, height, panning };
  }, [width, height, panning]);

  const attach = useCallback(
    (node: HTMLDivElement | null) => {
      if (node === null) return undefined;
      const behaviour = zoom<HTMLDivElement, unknown>()
        .scaleExtent([least, most])
        .extent(() => [[0, 0], [state.current.width, state.current.height]])
        .filter((event: MouseEvent) => {
          if (event.type === 'wheel') return event.ctrlKey || event.metaKey || state.current.panning;
          return state.current.panning && event.button === 0 && event.type !== 'dblclick';
        })
        .on('zoom', (event: D3ZoomEvent<HTMLDivElement, unknown>) => setTransform(event.transform));
      const chosen = select<HTMLDivElement, unknown>(node);
      behaviour(chosen);
      chosen.on('dblclick.zoom', () => behaviour.transform(chosen, zoomIdentity));
      held.current = { node, behaviour };
      return () => {
        chosen.on('.zoom', null);
        held.current = null;
      };
    },
    [least, most],
  );

  /** Runs a change on the element in hand, if it is on the page. */
  const act = useCallback((change: (behaviour: ZoomBehavior<HTMLDivElement, unknown>, chosen: Chosen) => void) => {
    if (held.current !== null) change(held.current.behaviour, select<HTMLDivElement, unknown>(held.current.node));
  }, []);
  const by = useCallback((factor: number) => act((behaviour, chosen) => behaviour.scaleBy(chosen, factor)), [act]);
  const reset = useCallback(() => act((behaviour, chosen) => behaviour.transform(chosen, zoomIdentity)), [act]);
  const pan = useCallback(
    (dx: number, dy: number) => act((behaviour, chosen) => behaviour.translateBy(chosen, dx / transform.k, dy / transform.k)),
    [act, transform],
  );
  const onKey = useCallback(
    (event: KeyboardEvent) => {
      const arrow = ARROWS[event.key];
      if (event.key === '+' || event.key === '=') by(1.4);
      else if (event.key === '-' || event.key === '_') by(1 / 1.4);
      else if (event.key === '0') reset();
      else if (arrow !== undefined && !event.ctrlKey && !event.metaKey) pan(...arrow);
      else return false;
      event.preventDefault();
      return true;
    },
    [by, pan, reset],
  );
  return { transform, attach, by, reset, onKey };
}
