import { ChevronDown, ChevronUp } from 'lucide-react';
import { useEffect, useState, type KeyboardEvent, type PointerEvent, type ReactNode } from 'react';
import * as z from 'zod';
import { IconButton } from '#src/components/ui/icon-button.tsx';
import { usePreference } from '#src/lib/preferences.ts';
import { TrayPortal } from './slots.tsx';

/** Heights in px of the whole tray, header included. */
export const TRAY = { shut: 36, least: 120, usual: 212, most: 560 } as const;
const HEADER_PX = 34;
const STEP_PX = 16;

const Height = z.number().int().min(TRAY.least).max(TRAY.most);

interface Props {
  /** Beside the title: holes in hand, add hole, what copper marks, rock key, tracks, depth window. */
  header?: ReactNode;
  /** Beside the title while closed: "72 intervals in 23 holes". */
  closedSummary?: ReactNode;
  /** Draws the core in a box of so many px; it scrolls in itself. */
  children: (bodyHeightPx: number) => ReactNode;
}

/**
 * The core tray's frame at the foot of the shell: resizable by its grip or the arrow keys, closed to
 * one line, its height kept for each person. Phones have none.
 */
export function TraySlot({ header, closedSummary, children }: Props) {
  const [kept, keep] = usePreference('tray-height', Height, TRAY.usual);
  const [isOpen, setOpen] = usePreference('tray-open', z.boolean(), true);
  const [dragged, setDragged] = useState<number | null>(null);
  const height = isOpen ? (dragged ?? kept) : TRAY.shut;
  useEffect(() => {
    document.documentElement.style.setProperty('--tray-now', `${height}px`);
    return () => void document.documentElement.style.removeProperty('--tray-now');
  }, [height]);
  return (
    <TrayPortal>
      <section
        aria-label="Core tray"
        className="relative flex min-w-0 flex-col border-t border-rule-firm bg-paper"
        style={{ height }}
      >
        {isOpen && (
          <Grip
            height={height}
            onDrag={setDragged}
            onKeep={(next) => {
              setDragged(null);
              keep(next);
            }}
          />
        )}
        <header className="flex h-[34px] shrink-0 items-center gap-2 overflow-hidden pr-3 pl-5">
          <h2 className="text-body leading-none font-semibold whitespace-nowrap">Core tray</h2>
          {isOpen ? (
            <div className="flex min-w-0 flex-1 items-center gap-2">{header}</div>
          ) : (
            <div className="min-w-0 flex-1 truncate text-caption text-ink-2">{closedSummary}</div>
          )}
          <IconButton
            icon={isOpen ? ChevronDown : ChevronUp}
            label={isOpen ? 'Close the tray' : 'Open the tray'}
            aria-expanded={isOpen}
            onClick={() => setOpen(!isOpen)}
          />
        </header>
        {isOpen && (
          <div className="min-h-0 flex-1 overflow-hidden">{children(height - HEADER_PX - 1)}</div>
        )}
      </section>
    </TrayPortal>
  );
}

const clamp = (height: number): number =>
  Math.round(Math.min(TRAY.most, Math.max(TRAY.least, Math.min(height, window.innerHeight * 0.7))));

interface GripProps {
  height: number;
  onDrag: (height: number) => void;
  onKeep: (height: number) => void;
}

function Grip({ height, onDrag, onKeep }: GripProps) {
  const [start, setStart] = useState<{ y: number; height: number } | null>(null);
  const heightAt = (event: PointerEvent) =>
    start ? clamp(start.height + start.y - event.clientY) : height;
  const onKeyDown = (event: KeyboardEvent) => {
    const next = {
      ArrowUp: height + STEP_PX,
      ArrowDown: height - STEP_PX,
      Home: TRAY.least,
      End: TRAY.most,
    }[event.key];
    if (next === undefined) return;
    event.preventDefault();
    onKeep(clamp(next));
  };
  return (
    <div
      role="separator"
      tabIndex={0}
      aria-orientation="horizontal"
      aria-label="Tray height"
      aria-valuenow={height}
      aria-valuemin={TRAY.least}
      aria-valuemax={TRAY.most}
      onKeyDown={onKeyDown}
      onPointerDown={(event) => {
        event.currentTarget.setPointerCapture(event.pointerId);
        setStart({ y: event.clientY, height });
      }}
      onPointerMove={(event) => start && onDrag(heightAt(event))}
      onPointerUp={(event) => {
        if (start) onKeep(heightAt(event));
        setStart(null);
      }}
      className="absolute inset-x-0 -top-[5px] z-2 grid h-2.5 cursor-ns-resize touch-none place-items-center"
    >
      <span className="h-1 w-11 rounded-full bg-rule-firm" />
    </div>
  );
}
