import { useRef } from 'react';
import { tickText, TICK_PX } from '../charts/chart-styles.ts';
import { panWindow, rulerMarks } from '../charts/depth-window.ts';
import type { DepthWindow } from '../charts/depth-window.ts';
import { textWidth } from '../charts/text-width.ts';
import { LABELS_PX } from './trough-layout.ts';

interface Props {
  width: number;
  lengthPx: number;
  window: DepthWindow;
  fit: DepthWindow;
  onWindow: (window: DepthWindow) => void;
}

export const RULER_PX = 18;

/** Depth ruler above the troughs; dragging it moves the window. */
export function TrayRuler({ width, lengthPx, window, fit, onWindow }: Props) {
  const drag = useRef<{ x: number; window: DepthWindow } | null>(null);
  const perM = lengthPx / (window[1] - window[0]);
  const x = (depthM: number) => LABELS_PX + (depthM - window[0]) * perM;
  return (
    <svg
      width={width}
      height={RULER_PX}
      aria-hidden="true"
      className="sticky top-0 z-10 block touch-none bg-paper"
      style={{ cursor: 'ew-resize' }}
      onPointerDown={(event) => {
        event.currentTarget.setPointerCapture?.(event.pointerId);
        drag.current = { x: event.clientX, window };
      }}
      onPointerMove={(event) => {
        if (drag.current !== null) onWindow(panWindow(drag.current.window, (drag.current.x - event.clientX) / perM, fit));
      }}
      onPointerUp={() => {
        drag.current = null;
      }}
    >
      {rulerMarks(window, lengthPx).map(({ depthM, label }) => (
        <g key={depthM}>
          <line x1={x(depthM)} x2={x(depthM)} y1={label === null ? 13 : 4} y2={17} stroke="var(--rule-firm)" />
          {label !== null && x(depthM) + 3 + textWidth(label, TICK_PX) < width && (
            <text x={x(depthM) + 3} y={11} style={tickText}>
              {label}
            </text>
          )}
        </g>
      ))}
    </svg>
  );
}
