import { useState } from 'react';
import type { KeyboardEvent, PointerEvent } from 'react';
import { selectMode } from '../charts/chart-types.ts';
import type { SelectMode } from '../charts/chart-types.ts';
import { showInWindow, zoomWindow } from '../charts/depth-window.ts';
import type { DepthWindow } from '../charts/depth-window.ts';
import { intervalAt, rowsAlong, rowsBetween, stepFrom } from './interval-walk.ts';
import { LABELS_PX } from './trough-layout.ts';
import type { MenuPlace, TrayHole } from './tray-types.ts';

/** What a trough tells the tray. */
export interface TroughActions {
  /** `at` is the pointer on the page; null when the keys moved. */
  onHover: (row: number | null, at: { x: number; y: number } | null) => void;
  onSelect: (rows: number[], mode: SelectMode) => void;
  onOpenMenu: (row: number, place: MenuPlace) => void;
  onWindow: (window: DepthWindow | null) => void;
}

interface Options extends TroughActions {
  hole: TrayHole;
  /** Ruler depths; those of the hole are greater by its origin. */
  window: DepthWindow;
  fit: DepthWindow;
  perM: number;
}

interface Drag {
  fromM: number;
  toM: number;
}

/** Pointer and keys over one trough: drag to take, step by interval, zoom. */
export function useTrough({ hole, window, fit, perM, onHover, onSelect, onOpenMenu, onWindow }: Options) {
  const [drag, setDrag] = useState<Drag | null>(null);
  const [cursor, setCursor] = useState<number | null>(null);
  const [anchor, setAnchor] = useState<number | null>(null);
  const { intervals, originM = 0 } = hole;
  const depthOf = (event: { clientX: number; currentTarget: Element }) =>
    window[0] + (event.clientX - event.currentTarget.getBoundingClientRect().left - LABELS_PX) / perM + originM;

  const moveTo = (index: number | null, extend: boolean) => {
    const interval = index === null ? undefined : intervals[index];
    if (index === null || interval === undefined) return;
    setCursor(index);
    const start = extend ? (anchor ?? cursor ?? index) : index;
    setAnchor(start);
    if (extend) onSelect(rowsAlong(intervals, start, index), 'replace');
    const shown = showInWindow(window, interval.fromM - originM, interval.toM - originM, fit);
    if (shown !== window) onWindow(shown);
    onHover(interval.row, null);
  };

  const onKeyDown = (event: KeyboardEvent<HTMLElement>) => {
    const by = { ArrowRight: 1, ArrowDown: 1, ArrowLeft: -1, ArrowUp: -1, PageDown: 10, PageUp: -10 }[event.key];
    const here = cursor === null ? undefined : intervals[cursor];
    const middle = here === undefined ? (window[0] + window[1]) / 2 : (here.fromM + here.toM) / 2 - originM;
    if (by !== undefined) moveTo(stepFrom(intervals, cursor, by, window[0] + originM), event.shiftKey);
    else if (event.key === 'Home') moveTo(0, event.shiftKey);
    else if (event.key === 'End') moveTo(intervals.length - 1, event.shiftKey);
    else if (event.key === '+' || event.key === '=') onWindow(zoomWindow(window, 1.5, middle, fit));
    else if (event.key === '-' || event.key === '_') onWindow(zoomWindow(window, 1 / 1.5, middle, fit));
    else if (event.key === '0') onWindow(null);
    else if (event.key === 'Escape') onSelect([], 'replace');
    else if (event.key === ' ' && here !== undefined) onSelect([here.row], selectMode(event));
    else if (event.key === 'Enter' && here !== undefined) {
      const rect = event.currentTarget.getBoundingClientRect();
      onOpenMenu(here.row, { x: rect.left + LABELS_PX + (middle - window[0]) * perM, y: rect.top + rect.height / 2 });
    } else return;
    event.preventDefault();
  };

  const pointer = {
    onPointerDown: (event: PointerEvent<HTMLElement>) => {
      if (event.button !== 0) return;
      event.currentTarget.setPointerCapture?.(event.pointerId);
      const depth = depthOf(event);
      setDrag({ fromM: depth, toM: depth });
      const index = intervalAt(intervals, depth);
      setCursor(index);
      setAnchor(index);
    },
    onPointerMove: (event: PointerEvent<HTMLElement>) => {
      const depth = depthOf(event);
      if (drag !== null) setDrag({ ...drag, toM: depth });
      const index = intervalAt(intervals, depth);
      onHover(index === null ? null : (intervals[index]?.row ?? null), { x: event.clientX, y: event.clientY });
    },
    onPointerUp: (event: PointerEvent<HTMLElement>) => {
      if (drag === null) return;
      onSelect(rowsBetween(intervals, drag.fromM, depthOf(event)), selectMode(event));
      setDrag(null);
    },
    onPointerCancel: () => setDrag(null),
    onPointerLeave: () => onHover(null, null),
    onDoubleClick: () => onWindow(null),
    onContextMenu: (event: { preventDefault: () => void; clientX: number; clientY: number; currentTarget: Element }) => {
      const index = intervalAt(intervals, depthOf(event));
      const interval = index === null ? undefined : intervals[index];
      if (interval === undefined) return;
      event.preventDefault();
      setCursor(index);
      onOpenMenu(interval.row, { x: event.clientX, y: event.clientY });
    },
  };
  return { drag, cursor, handlers: { ...pointer, onKeyDown } };
}
