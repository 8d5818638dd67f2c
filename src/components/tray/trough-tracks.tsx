import { memo } from 'react';
import { runFill, slotColours } from '../charts/category-marks.tsx';
import { codeText, TICK_PX } from '../charts/chart-styles.ts';
import { gradePath, inWindow, joined, slotsOf, structurePath, wallPath } from '../charts/core-paths.ts';
import type { Along, CoreInterval, RockInterval } from '../charts/core-types.ts';
import type { DepthWindow } from '../charts/depth-window.ts';
import { rockFill } from '../charts/rock-patterns.tsx';
import type { RockKeyEntry } from '../charts/rock-patterns.tsx';
import { textWidth } from '../charts/text-width.ts';
import type { TrayHole } from './tray-types.ts';
import type { TroughLayout } from './trough-layout.ts';

interface Props {
  hole: TrayHole;
  layout: TroughLayout;
  along: Along;
  /** In depths of this hole. */
  window: DepthWindow;
  rockKey: readonly RockKeyEntry[];
  highestGrade: number;
  /** Of the patterns and hatches the tray defines once. */
  prefix: string;
}

interface Band {
  top: number;
  height: number;
  along: Along;
  prefix: string;
}

/** The five tracks of one hole; drawn again only when the hole, the depth or the tracks change. */
export const TroughTracks = memo(function TroughTracks({ hole, layout, along, window, rockKey, highestGrade, prefix }: Props) {
  const intervals = hole.intervals.filter((interval) => inWindow(interval, window));
  return (
    <g>
      {layout.tracks.map(({ name, top, height }) => {
        const band = { top, height, along, prefix };
        if (name === 'rock') return <RockTrack key={name} {...band} rock={hole.rock.filter((run) => inWindow(run, window))} rockKey={rockKey} />;
        if (name === 'group') return <GroupTrack key={name} {...band} intervals={intervals} />;
        if (name === 'domain') return <DomainTrack key={name} {...band} intervals={intervals} />;
        if (name === 'grade') {
          return <path key={name} d={gradePath(intervals, along, top, height, highestGrade)} fill="var(--ink-2)" opacity={0.9} />;
        }
        const structures = hole.structures.filter(({ depthM }) => depthM >= window[0] && depthM <= window[1]);
        return (
          <g key={name} fill="none">
            <path d={structurePath(structures, true, along, top, height)} stroke="var(--ink)" strokeWidth={1.3} />
            <path d={structurePath(structures, false, along, top, height)} stroke="var(--ink-3)" strokeDasharray="2 1.5" />
          </g>
        );
      })}
    </g>
  );
});

function RockTrack({ rock, rockKey, top, height, along, prefix }: Band & { rock: readonly RockInterval[]; rockKey: readonly RockKeyEntry[] }) {
  return (
    <g>
      {joined(rock, (a, b) => a.code === b.code).map(({ fromM, toM, code }) => {
        const pattern = rockKey.find((entry) => entry.code === code)?.pattern ?? null;
        const width = Math.max(0.4, along(toM) - along(fromM));
        return <rect key={fromM} x={along(fromM)} y={top} width={width} height={height} fill={rockFill(pattern, prefix)} stroke="var(--rock-mark)" strokeWidth={0.6} />;
      })}
    </g>
  );
}

function GroupTrack({ intervals, top, height, along, prefix }: Band & { intervals: readonly CoreInterval[] }) {
  const [first, last] = [intervals[0], intervals.at(-1)];
  if (first === undefined || last === undefined) return null;
  return (
    <g>
      {slotsOf(intervals).map((slot) => (
        <path key={slot} d={wallPath(intervals, slot, along, top, height)} fill={runFill(slot, prefix)} />
      ))}
      <line x1={along(first.fromM)} x2={along(last.toM)} y1={top} y2={top} stroke="var(--rule-firm)" strokeWidth={0.5} strokeDasharray="1 3" />
    </g>
  );
}

const sameDomain = (a: CoreInterval, b: CoreInterval) =>
  a.domain?.code === b.domain?.code && (a.isHost === true) === (b.isHost === true) && (a.isHandSet === true) === (b.isHandSet === true);

const domainRuns = (intervals: readonly CoreInterval[]) => joined(intervals, sameDomain).filter(({ domain }) => domain !== null);
const isOutline = ({ isHost, domain }: CoreInterval) => isHost === true || domain === null || domain.slot === null;

function DomainTrack({ intervals, top, height, along, prefix }: Band & { intervals: readonly CoreInterval[] }) {
  return (
    <g>
      {domainRuns(intervals).map((run) => {
        const slot = run.domain?.slot ?? null;
        const x = along(run.fromM);
        const width = Math.max(0.4, along(run.toM) - x);
        const paint = slot === null || isOutline(run) ? { fill: 'none', stroke: 'var(--rule-firm)' } : { fill: runFill(slot, prefix), stroke: slotColours(slot).edge };
        const notch = Math.min(5, width);
        return (
          <g key={run.row}>
            <rect x={x} y={top} width={width} height={height} {...paint} strokeWidth={0.75} />
            {run.isHandSet === true && <path d={`M${x + width - notch} ${top}h${notch}v${notch}z`} fill="var(--ink)" />}
          </g>
        );
      })}
    </g>
  );
}

interface CodesProps {
  intervals: readonly CoreInterval[];
  layout: TroughLayout;
  along: Along;
  window: DepthWindow;
}

/** Codes of rocks without a pattern, where they fit in the part on show; above the blocks so that none is cut. */
export const RockCodes = memo(function RockCodes({ rock, rockKey, layout, along, window }: Omit<CodesProps, 'intervals'> & { rock: readonly RockInterval[]; rockKey: readonly RockKeyEntry[] }) {
  const track = layout.tracks.find(({ name }) => name === 'rock');
  if (track === undefined) return null;
  const plain = new Set(rockKey.flatMap(({ code, pattern }) => (pattern === null ? [code] : [])));
  return (
    <g>
      {joined(rock.filter((interval) => inWindow(interval, window)), (a, b) => a.code === b.code).map(({ fromM, toM, code }) => {
        const from = along(Math.max(fromM, window[0]));
        if (!plain.has(code) || along(Math.min(toM, window[1])) - from < textWidth(code, TICK_PX, 'mono') + 6) return null;
        return (
          <text key={fromM} x={from + 4} y={track.top + track.height / 2} dy="0.36em" style={{ ...codeText, fontWeight: 400, fill: 'var(--ink-2)', paintOrder: 'stroke', stroke: 'var(--rock-ground)', strokeWidth: 3 }}>
            {code}
          </text>
        );
      })}
    </g>
  );
});

/** Codes of domains, where they fit in the part on show; above the blocks so that none is cut. */
export const DomainCodes = memo(function DomainCodes({ intervals, layout, along, window }: CodesProps) {
  const track = layout.tracks.find(({ name }) => name === 'domain');
  if (track === undefined) return null;
  return (
    <g>
      {domainRuns(intervals.filter((interval) => inWindow(interval, window))).map((run) => {
        const { code, slot } = run.domain ?? { code: '', slot: null };
        const from = along(Math.max(run.fromM, window[0]));
        if (along(Math.min(run.toM, window[1])) - from < textWidth(code, TICK_PX, 'mono') + 7) return null;
        const plain = slot === null || isOutline(run);
        const fill = plain ? 'var(--ink-3)' : slotColours(slot).hollow ? 'var(--ink)' : slotColours(slot).onFill;
        return (
          <text key={run.row} x={from + 4} y={track.top + track.height / 2} dy="0.36em" style={{ ...codeText, fill, ...(plain ? { fontWeight: 400 } : {}) }}>
            {code}
          </text>
        );
      })}
    </g>
  );
});
