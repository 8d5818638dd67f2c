import type { ReactNode } from 'react';
import { formatInterval } from '#src/lib/format.ts';
import type { Frame } from '#src/lib/frame.ts';

interface Props {
  frame: Frame;
  row: number;
  /** Up to four further lines. */
  lines: readonly ReactNode[];
}

/** What a plot says of one row: hole and depth first. */
export function RowTooltip({ frame, row, lines }: Props) {
  const hole = frame.holeAt(row);
  return (
    <>
      <div className="font-mono font-medium">{hole ?? `surface sample ${row + 1}`}</div>
      {hole !== null && <div>{formatInterval(frame.fromM[row] ?? NaN, frame.toM[row] ?? NaN)}</div>}
      {lines.map((line, index) => (
        <div key={index}>{line}</div>
      ))}
    </>
  );
}
