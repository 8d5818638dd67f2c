import type { ReactNode } from 'react';
import type { Box } from './chart-types.ts';

const WIDTH_PX = 220;

interface Props {
  /** The point spoken of, in pixels of the box. */
  x: number;
  y: number;
  box: Box;
  children: ReactNode;
}

/** A sheet beside a mark: to the right and below where there is room, else to the other side. */
export function ChartTooltip({ x, y, box, children }: Props) {
  const toLeft = x + 14 + WIDTH_PX > box.width && x > box.width / 2;
  const upwards = y > box.height / 2;
  const shiftX = toLeft ? 'calc(-100% - 12px)' : '12px';
  const shiftY = upwards ? 'calc(-100% - 8px)' : '8px';
  return (
    <div
      role="tooltip"
      className="pointer-events-none absolute z-20 w-max rounded-3 border border-rule bg-sheet px-2 py-1 text-caption text-ink shadow-float"
      style={{
        left: x,
        top: y,
        maxWidth: Math.min(WIDTH_PX, box.width),
        transform: `translate(${shiftX}, ${shiftY})`,
      }}
    >
      {children}
    </div>
  );
}
