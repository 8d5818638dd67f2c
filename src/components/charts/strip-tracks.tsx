import { runFill, slotColours } from './category-marks.tsx';
import { codeText, TICK_PX } from './chart-styles.ts';
import type { Category } from './chart-types.ts';
import { highestGrade, inWindow, joined, rootShare } from './core-paths.ts';
import type { CoreInterval, DepthInterval } from './core-types.ts';
import type { HoleStripProps } from './hole-strip.tsx';
import { rockFill } from './rock-patterns.tsx';
import { textWidth } from './text-width.ts';

/** Length along the hole and place across it, whichever way the strip lies. */
export interface Laid {
  along: (depthM: number) => number;
  rect: (from: number, to: number, low: number, high: number) => { x: number; y: number; width: number; height: number };
  isVertical: boolean;
}

export function laid(props: HoleStripProps, start: number, length: number): Laid {
  const { fromM, toM, orientation } = props;
  const isVertical = orientation === 'vertical';
  const along = (depthM: number) => start + ((Math.min(toM, Math.max(fromM, depthM)) - fromM) / (toM - fromM)) * length;
  return {
    along,
    isVertical,
    rect: (from, to, low, high) => {
      const [a, span, across] = [along(from), Math.max(0.4, along(to) - along(from)), high - low];
      return isVertical ? { x: low, y: a, width: across, height: span } : { x: a, y: low, width: span, height: across };
    },
  };
}

interface TrackProps {
  name: string;
  props: HoleStripProps;
  place: Laid;
  low: number;
  high: number;
  prefix: string;
}

/** One track of a strip, by name; a name that is none of the others is the grade. */
export function StripTrack({ name, props, place, low, high, prefix }: TrackProps) {
  const window = [props.fromM, props.toM] as const;
  if (name === 'rock') return <RockTrack props={props} place={place} low={low} high={high} prefix={prefix} />;
  if (name === 'weathering') return <WeatheringTrack props={props} place={place} low={low} high={high} />;
  if (name === 'structure') return <StructureTrack props={props} place={place} low={low} high={high} />;
  const intervals = (props.intervals ?? []).filter((interval) => inWindow(interval, window));
  if (name === 'group') return <GroupTrack intervals={intervals} groups={props.groups ?? []} place={place} low={low} high={high} prefix={prefix} />;
  const highest = highestGrade([{ intervals }]);
  return (
    <g>
      {intervals.map(({ row, fromM, toM, grade }) => {
        if (grade === null) return null;
        const rise = Math.max(0.6, (high - low) * rootShare(grade, highest));
        return <rect key={row} {...(place.isVertical ? place.rect(fromM, toM, low, low + rise) : place.rect(fromM, toM, high - rise, high))} fill="var(--ink-2)" opacity={0.9} />;
      })}
    </g>
  );
}

function RunLabel({ place, run, low, high, text, fill }: { place: Laid; run: DepthInterval; low: number; high: number; text: string; fill: string }) {
  const { x, y, width, height } = place.rect(run.fromM, run.toM, low, high);
  const long = textWidth(text, TICK_PX, 'mono') + 8;
  if (text === '') return null;
  if (place.isVertical && long > width && long <= height && width >= 12) {
    return (
      <text transform={`translate(${x + width / 2} ${y + height / 2}) rotate(-90)`} dy="0.35em" textAnchor="middle" style={{ ...codeText, fill }}>
        {text}
      </text>
    );
  }
  if (long > width || height < 12) return null;
  return (
    <text x={x + 5} y={y + height / 2} dy="0.35em" style={{ ...codeText, fill }}>
      {text}
    </text>
  );
}

type PlainTrack = Omit<TrackProps, 'name' | 'prefix'>;

function RockTrack({ props, place, low, high, prefix }: PlainTrack & { prefix: string }) {
  const runs = joined(props.rock, (a, b) => a.code === b.code).filter((run) => inWindow(run, [props.fromM, props.toM]));
  return (
    <g>
      {runs.map((run) => {
        const pattern = props.rockKey.find(({ code }) => code === run.code)?.pattern ?? null;
        return (
          <g key={run.fromM}>
            <rect {...place.rect(run.fromM, run.toM, low, high)} fill={rockFill(pattern, prefix)} stroke="var(--rock-mark)" strokeWidth={0.6} />
            {pattern === null && <RunLabel place={place} run={run} low={low} high={high} text={run.code} fill="var(--ink-2)" />}
          </g>
        );
      })}
    </g>
  );
}

/** Weathered rock is darker ground; the word stands where it fits. */
function WeatheringTrack({ props, place, low, high }: PlainTrack) {
  const order = props.weatheringOrder ?? [];
  const shade = (code: string) => {
    const at = order.indexOf(code);
    return at < 0 || order.length < 2 ? 0.2 : 0.55 * (1 - at / (order.length - 1));
  };
  return (
    <g>
      {joined(props.weathering ?? [], (a, b) => a.code === b.code).map((run) => (
        <g key={run.fromM}>
          <rect {...place.rect(run.fromM, run.toM, low, high)} fill="var(--ink-3)" fillOpacity={shade(run.code)} stroke="var(--rule-firm)" strokeWidth={0.6} />
          <RunLabel place={place} run={run} low={low} high={high} text={run.code} fill="var(--ink)" />
        </g>
      ))}
    </g>
  );
}

function GroupTrack({ intervals, groups, place, low, high, prefix }: { intervals: readonly CoreInterval[]; groups: readonly Category[]; place: Laid; low: number; high: number; prefix: string }) {
  const runs = joined(intervals, (a, b) => a.groupSlot === b.groupSlot);
  return (
    <g>
      {runs.map((run) => {
        if (run.groupSlot === null) return null;
        const { edge, onFill, hollow } = slotColours(run.groupSlot);
        return (
          <g key={run.row}>
            <rect {...place.rect(run.fromM, run.toM, low, high)} fill={runFill(run.groupSlot, prefix)} stroke={edge} strokeWidth={0.7} />
            {!hollow && <RunLabel place={place} run={run} low={low} high={high} text={groups.find(({ slot }) => slot === run.groupSlot)?.label ?? ''} fill={onFill} />}
          </g>
        );
      })}
    </g>
  );
}

function StructureTrack({ props, place, low, high }: PlainTrack) {
  const [middle, reach] = [(low + high) / 2, Math.min(7, (high - low) / 2 - 1)];
  return (
    <g>
      {(props.structures ?? []).map(({ depthM, alphaDeg, sure }, index) => {
        const angle = ((alphaDeg ?? 45) * Math.PI) / 180;
        const [along, across] = [reach * Math.cos(angle), reach * Math.sin(angle)];
        const at = place.along(depthM);
        const line = place.isVertical
          ? { x1: middle - across, y1: at - along, x2: middle + across, y2: at + along }
          : { x1: at - along, y1: middle + across, x2: at + along, y2: middle - across };
        return <line key={index} {...line} stroke={sure ? 'var(--ink)' : 'var(--ink-3)'} strokeWidth={sure ? 1.3 : 1} strokeDasharray={sure ? undefined : '2 1.5'} />;
      })}
    </g>
  );
}
