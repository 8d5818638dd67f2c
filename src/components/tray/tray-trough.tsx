import { useCallback, useMemo } from 'react';
import { formatMetres } from '#src/lib/format.ts';
import { tickText, type } from '../charts/chart-styles.ts';
import { isPicked } from '../charts/chart-types.ts';
import type { PickedRows } from '../charts/chart-types.ts';
import type { Along, CoreInterval, DepthInterval } from '../charts/core-types.ts';
import { labelStep } from '../charts/depth-window.ts';
import type { DepthWindow } from '../charts/depth-window.ts';
import type { RockKeyEntry } from '../charts/rock-patterns.tsx';
import { fitText } from '../charts/text-width.ts';
import { chosenRuns } from './interval-walk.ts';
import { DomainCodes, RockCodes, TroughTracks } from './trough-tracks.tsx';
import { LABELS_PX, TROUGH_GAP_PX } from './trough-layout.ts';
import type { TroughLayout } from './trough-layout.ts';
import type { TrayHole } from './tray-types.ts';
import { useTrough } from './use-trough.ts';
import type { TroughActions } from './use-trough.ts';

interface Props extends TroughActions {
  hole: TrayHole;
  layout: TroughLayout;
  width: number;
  lengthPx: number;
  window: DepthWindow;
  fit: DepthWindow;
  rockKey: readonly RockKeyEntry[];
  highestGrade: number;
  gradeLabel: string;
  prefix: string;
  selectedRows: PickedRows | undefined;
  hoveredRow: number | null;
}

/** One hole laid in its trough, with what is chosen and what is under the pointer. */
export function TrayTrough(props: Props) {
  const { hole, layout, width, lengthPx, window, selectedRows, hoveredRow } = props;
  const { originM = 0 } = hole;
  const [lowM] = window;
  const perM = lengthPx / (window[1] - lowM);
  const along = useCallback((depthM: number) => LABELS_PX + (depthM - originM - lowM) * perM, [originM, lowM, perM]);
  const { drag, cursor, handlers } = useTrough({ ...props, perM });
  const highM = window[1];
  const own = useMemo((): DepthWindow => [lowM + originM, highM + originM], [lowM, highM, originM]);
  const hovered = hoveredRow === null ? undefined : hole.intervals.find(({ row }) => row === hoveredRow);
  const atCursor = cursor === null ? undefined : hole.intervals[cursor];
  const clip = `${props.prefix}-${hole.name.replace(/[^\w-]/g, '_')}`;
  return (
    <div
      role="application"
      tabIndex={0}
      aria-label={`Core of ${hole.name}, ${formatMetres(hole.lengthM)}. Arrows step by interval, Shift with arrows extends, Space takes, Enter opens the menu, plus and minus zoom, 0 fits.`}
      className="relative block touch-pan-y focus-visible:-outline-offset-2"
      style={{ height: layout.height + TROUGH_GAP_PX }}
      {...handlers}
    >
      <svg width={width} height={layout.height + 2} className="block select-none" aria-hidden="true">
        <clipPath id={clip}>
          <rect x={LABELS_PX - 4} y={-2} width={lengthPx + 8} height={layout.height + 4} />
        </clipPath>
        <TroughLabels hole={hole} layout={layout} gradeLabel={props.gradeLabel} />
        <g clipPath={`url(#${clip})`}>
          <rect x={along(0) - 4} y={0.5} width={Math.max(1, along(hole.lengthM) - along(0) + 8)} height={layout.height - 1} rx={3} fill="var(--trough)" stroke="var(--trough-deep)" />
          <TroughTracks hole={hole} layout={layout} along={along} window={own} rockKey={props.rockKey} highestGrade={props.highestGrade} prefix={props.prefix} />
          <Blocks along={along} window={own} lengthPx={lengthPx} lengthM={hole.lengthM} height={layout.height} />
          <RockCodes rock={hole.rock} rockKey={props.rockKey} layout={layout} along={along} window={own} />
          <DomainCodes intervals={hole.intervals} layout={layout} along={along} window={own} />
          <Chosen runs={selectedRows === undefined ? [] : chosenRuns(hole.intervals, (row) => isPicked(selectedRows, row))} along={along} height={layout.height} />
          {drag !== null && <DragWash drag={drag} along={along} height={layout.height} />}
          {hovered !== undefined && <Hairline interval={hovered} along={along} height={layout.height} />}
          {atCursor !== undefined && atCursor.row !== hovered?.row && <CursorFrame interval={atCursor} along={along} height={layout.height} />}
        </g>
        <EndBar x={along(hole.lengthM) + 6} limit={LABELS_PX + lengthPx + 6} width={width} height={layout.height} />
      </svg>
    </div>
  );
}

function TroughLabels({ hole, layout, gradeLabel }: { hole: TrayHole; layout: TroughLayout; gradeLabel: string }) {
  return (
    <g>
      <text x={20} y={12} style={{ ...type('mono', 500, 12), fill: 'var(--ink)' }}>
        {fitText(hole.name, 62, 12, 'mono')}
      </text>
      <text x={20} y={26} style={tickText}>
        {formatMetres(hole.lengthM)}
      </text>
      {layout.tracks.map(({ name, top, height }) => (
        <text key={name} x={LABELS_PX - 9} y={top + height / 2} dy="0.35em" textAnchor="end" style={tickText}>
          {name === 'grade' ? fitText(gradeLabel, 48, 11) : name}
        </text>
      ))}
    </g>
  );
}

const BLOCK_M = 50;

/** Pale blocks as in a core tray, each 50 m, further apart where that is too close to see. */
function Blocks({ along, window, lengthPx, lengthM, height }: { along: Along; window: DepthWindow; lengthPx: number; lengthM: number; height: number }) {
  const step = Math.max(BLOCK_M, labelStep(window, lengthPx));
  const first = Math.max(1, Math.ceil(window[0] / step));
  const count = Math.max(0, Math.floor(Math.min(window[1], lengthM) / step) - first + 1);
  return (
    <g fill="var(--paper)" stroke="var(--rule-firm)" strokeWidth={0.5}>
      {Array.from({ length: count }, (_value, i) => (
        <rect key={i} x={along((first + i) * step) - 1} y={0.5} width={2} height={height - 1} />
      ))}
    </g>
  );
}

interface MarkProps {
  along: Along;
  height: number;
}

function Chosen({ runs, along, height }: MarkProps & { runs: readonly DepthInterval[] }) {
  return (
    <g>
      {runs.map(({ fromM, toM }) => {
        const [x, wide] = [along(fromM), Math.max(1.5, along(toM) - along(fromM))];
        return (
          <g key={fromM} fill="var(--copper)">
            <rect x={x} y={0} width={wide} height={height} opacity={0.13} />
            <rect x={x} y={0} width={wide} height={3} />
          </g>
        );
      })}
    </g>
  );
}

function DragWash({ drag, along, height }: MarkProps & { drag: { fromM: number; toM: number } }) {
  const [low, high] = [Math.min(drag.fromM, drag.toM), Math.max(drag.fromM, drag.toM)];
  return <rect x={along(low)} y={0} width={along(high) - along(low)} height={height} fill="var(--copper)" fillOpacity={0.09} stroke="var(--copper)" strokeDasharray="5 3" />;
}

function Hairline({ interval, along, height }: MarkProps & { interval: CoreInterval }) {
  const [from, to] = [along(interval.fromM), along(interval.toM)];
  return (
    <g>
      <rect x={from} y={0} width={Math.max(1, to - from)} height={height} fill="var(--ink)" opacity={0.12} />
      <line x1={(from + to) / 2} x2={(from + to) / 2} y1={0} y2={height} stroke="var(--ink)" />
    </g>
  );
}

function CursorFrame({ interval, along, height }: MarkProps & { interval: CoreInterval }) {
  const from = along(interval.fromM);
  return <rect x={from} y={1} width={Math.max(2, along(interval.toM) - from)} height={height - 2} fill="none" stroke="var(--ink)" strokeDasharray="2 2" />;
}

/** A firm bar where the hole ends, when the end is on show. */
function EndBar({ x, limit, width, height }: { x: number; limit: number; width: number; height: number }) {
  if (x > limit || x < LABELS_PX) return null;
  return (
    <g>
      <line x1={x} x2={x} y1={1} y2={height - 1} stroke="var(--ink-2)" strokeWidth={2} />
      {x + 28 < width && (
        <text x={x + 5} y={height / 2} dy="0.35em" style={tickText}>
          end
        </text>
      )}
    </g>
  );
}
