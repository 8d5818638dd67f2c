import { useRef } from 'react';
import type { KeyboardEvent } from 'react';

interface Props {
  height: number;
  least: number;
  most: number;
  onHeight: (height: number) => void;
}

const STEP_PX = 16;

/** The upper edge of the tray: drag it, or use the arrow keys, to change the height. */
export function TrayGrip({ height, least, most, onHeight }: Props) {
  const drag = useRef<{ y: number; height: number } | null>(null);
  const set = (wanted: number) => onHeight(Math.round(Math.min(most, Math.max(least, wanted))));
  const onKeyDown = (event: KeyboardEvent) => {
    const wanted = { ArrowUp: height + STEP_PX, ArrowDown: height - STEP_PX, Home: least, End: most }[event.key];
    if (wanted === undefined) return;
    event.preventDefault();
    set(wanted);
  };
  return (
    <div
      role="separator"
      tabIndex={0}
      aria-orientation="horizontal"
      aria-label="Height of the tray"
      aria-valuenow={height}
      aria-valuemin={least}
      aria-valuemax={most}
      className="absolute inset-x-0 -top-[5px] z-20 grid h-2.5 cursor-ns-resize touch-none place-items-center"
      onKeyDown={onKeyDown}
      onPointerDown={(event) => {
        event.currentTarget.setPointerCapture?.(event.pointerId);
        drag.current = { y: event.clientY, height };
      }}
      onPointerMove={(event) => {
        if (drag.current !== null) set(drag.current.height + drag.current.y - event.clientY);
      }}
      onPointerUp={() => {
        drag.current = null;
      }}
    >
      <span className="h-1 w-11 rounded-1 bg-rule-firm" />
    </div>
  );
}
