import { memo, useDeferredValue } from 'react';
import type { Category } from '../charts/chart-types.ts';
import { DataTable } from '../charts/data-table.tsx';
import { inWindow } from '../charts/core-paths.ts';
import type { DepthWindow } from '../charts/depth-window.ts';
import type { RockKeyEntry } from '../charts/rock-patterns.tsx';
import { intervalWords } from './tray-tooltip.tsx';
import type { TrayHole } from './tray-types.ts';

interface Props {
  holes: readonly TrayHole[];
  window: DepthWindow;
  groups: readonly Category[];
  rockKey: readonly RockKeyEntry[];
  gradeLabel: string;
}

const MOST_ROWS = 200;

/** The intervals in view as a table for screen readers, hole by hole. */
export const TrayTable = memo(function TrayTable({ holes, window, groups, rockKey, gradeLabel }: Props) {
  const settled = useDeferredValue(window);
  return (
    <>
      {holes.map((hole) => {
        const { originM = 0 } = hole;
        const own = [settled[0] + originM, settled[1] + originM] as const;
        const all = hole.intervals.filter((interval) => inWindow(interval, own));
        const rows = all.slice(0, MOST_ROWS).map((interval) => {
          const words = intervalWords({ hole, interval, groups, rockKey, gradeLabel });
          return [words.depth, words.rock, words.group, words.grade, words.domain];
        });
        const rest = all.length > MOST_ROWS ? `, the first ${MOST_ROWS} of ${all.length}: narrow the depth window for the rest` : '';
        return <DataTable key={hole.name} table={{ caption: `Intervals of ${hole.name} in view${rest}`, columns: ['Depth', 'Rock', 'Group', gradeLabel, 'Domain'], rows }} />;
      })}
    </>
  );
});
