import { useCallback, useEffect, useId, useMemo, useRef, useState } from 'react';
import type { ReactNode } from 'react';
import { createPortal } from 'react-dom';
import { HollowSlotDefs } from '../charts/category-marks.tsx';
import { highestGrade } from '../charts/core-paths.ts';
import { panWindow, zoomWindow } from '../charts/depth-window.ts';
import type { DepthWindow } from '../charts/depth-window.ts';
import { RockPatternDefs } from '../charts/rock-patterns.tsx';
import { useBox } from '../charts/use-box.ts';
import type { CoreTrayProps } from './core-tray.tsx';
import { TrayRuler } from './tray-ruler.tsx';
import { TrayTable } from './tray-table.tsx';
import { intervalWords, TrayTooltip } from './tray-tooltip.tsx';
import { TrayTrough } from './tray-trough.tsx';
import type { MenuPlace, TrackName, TrayHole } from './tray-types.ts';
import { END_PX, LABELS_PX, troughLayout } from './trough-layout.ts';

interface Props extends CoreTrayProps {
  tracks: ReadonlySet<TrackName>;
  shown: DepthWindow;
  fit: DepthWindow;
  onWindow: (window: DepthWindow | null) => void;
}

const ignore = () => undefined;

/** Ruler and troughs; Ctrl with the wheel zooms about the pointer, Shift with the wheel moves along. */
export function TrayBody(props: Props) {
  const { holes, shown, fit, onWindow, tracks, groups, rockKey, gradeLabel } = props;
  const prefix = useId();
  const [measure, box] = useBox({ width: 1180, height: 160 });
  const bodyRef = useRef<HTMLDivElement>(null);
  const [at, setAt] = useState<MenuPlace | null>(null);
  const layout = useMemo(() => troughLayout(tracks), [tracks]);
  const highest = useMemo(() => highestGrade(holes), [holes]);
  const lengthPx = Math.max(80, box.width - LABELS_PX - END_PX);
  const attachWheel = useWheel(shown, fit, lengthPx, onWindow);
  const hoveredRow = props.hoveredRow ?? null;
  const lit = useMemo(() => findRow(holes, hoveredRow), [holes, hoveredRow]);
  const words = { groups, rockKey, gradeLabel };
  return (
    <div ref={attachWheel} className="relative min-h-0 flex-1 overflow-x-hidden overflow-y-auto pb-1">
      <div ref={bodyRef} className="sticky top-0 h-0" />
      <div ref={measure} className="relative min-h-4">
        <svg width={0} height={0} aria-hidden="true" className="absolute">
          <RockPatternDefs prefix={prefix} />
          <HollowSlotDefs prefix={prefix} />
        </svg>
        <TrayRuler width={box.width} lengthPx={lengthPx} window={shown} fit={fit} onWindow={onWindow} />
        {holes.map((hole) => (
          <TrayTrough
            key={hole.name}
            hole={hole}
            layout={layout}
            width={box.width}
            lengthPx={lengthPx}
            window={shown}
            fit={fit}
            rockKey={rockKey}
            highestGrade={highest}
            gradeLabel={gradeLabel}
            prefix={prefix}
            selectedRows={props.selectedRows}
            hoveredRow={hoveredRow}
            onHover={(row, place) => {
              setAt(row === null || place === null ? null : { x: place.x, y: bodyRef.current?.getBoundingClientRect().top ?? place.y });
              if (row !== hoveredRow) props.onHover?.(row);
            }}
            onSelect={props.onSelect ?? ignore}
            onOpenMenu={props.onOpenMenu ?? ignore}
            onWindow={onWindow}
          />
        ))}
      </div>
      {at !== null && lit !== null && (
        <PointerSheet at={at}>
          <TrayTooltip {...lit} {...words} highestGrade={highest} />
        </PointerSheet>
      )}
      <span role="status" className="sr-only">
        {lit === null || at !== null ? '' : `${lit.hole.name}, ${Object.values(intervalWords({ ...lit, ...words })).join(', ')}`}
      </span>
      <TrayTable holes={holes} window={shown} {...words} />
    </div>
  );
}

const SHEET_PX = 240;

/** A tooltip above the troughs, so that it hides no core, and outside the tray, so that its edge does not cut it. */
function PointerSheet({ at, children }: { at: MenuPlace; children: ReactNode }) {
  const left = Math.max(8, Math.min(at.x + 14, window.innerWidth - SHEET_PX - 8));
  return createPortal(
    <div
      role="tooltip"
      className="pointer-events-none fixed z-40 w-max rounded-3 border border-rule bg-sheet px-2.5 py-1.5 text-caption text-ink shadow-float"
      style={{ left, top: at.y - 2, maxWidth: SHEET_PX, transform: 'translateY(-100%)' }}
    >
      {children}
    </div>,
    document.body,
  );
}

function findRow(holes: readonly TrayHole[], row: number | null) {
  if (row === null) return null;
  for (const hole of holes) {
    const interval = hole.intervals.find((candidate) => candidate.row === row);
    if (interval !== undefined) return { hole, interval };
  }
  return null;
}

/** React listens to the wheel passively, so the page would zoom too: this listener can stop it. */
function useWheel(shown: DepthWindow, fit: DepthWindow, lengthPx: number, onWindow: (window: DepthWindow) => void) {
  const state = useRef({ shown, fit, lengthPx, onWindow });
  useEffect(() => {
    state.current = { shown, fit, lengthPx, onWindow };
  });
  return useCallback((node: HTMLElement | null) => {
    if (node === null) return undefined;
    const onWheel = (event: WheelEvent) => {
      const now = state.current;
      const perM = now.lengthPx / (now.shown[1] - now.shown[0]);
      const sideways = event.shiftKey && event.deltaX === 0 ? event.deltaY : event.deltaX;
      if (event.ctrlKey || event.metaKey) {
        event.preventDefault();
        const about = now.shown[0] + (event.clientX - node.getBoundingClientRect().left - LABELS_PX) / perM;
        now.onWindow(zoomWindow(now.shown, 2 ** (-event.deltaY / 300), about, now.fit));
      } else if (sideways !== 0) {
        event.preventDefault();
        now.onWindow(panWindow(now.shown, sideways / perM, now.fit));
      }
    };
    node.addEventListener('wheel', onWheel, { passive: false });
    return () => node.removeEventListener('wheel', onWheel);
  }, []);
}
