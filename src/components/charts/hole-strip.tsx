import { useId } from 'react';
import { ChartFrame } from './chart-frame.tsx';
import { HollowSlotDefs } from './category-marks.tsx';
import { captionText, LABEL_PX, TICK_PX, tickText } from './chart-styles.ts';
import type { Box, Category, ChartBasics } from './chart-types.ts';
import type { CoreInterval, CoreStructure, DepthInterval, RockInterval } from './core-types.ts';
import { RockPatternDefs } from './rock-patterns.tsx';
import type { RockKeyEntry } from './rock-patterns.tsx';
import { rulerMarks } from './depth-window.ts';
import { laid, StripTrack } from './strip-tracks.tsx';
import type { Laid } from './strip-tracks.tsx';
import { fitText, textWidth } from './text-width.ts';

export interface HoleStripProps extends ChartBasics {
  fromM: number;
  toM: number;
  orientation?: 'horizontal' | 'vertical';
  rock: readonly RockInterval[];
  rockKey: readonly RockKeyEntry[];
  /** Weathering or another logged term, written and shaded by its place in `weatheringOrder`. */
  weathering?: readonly RockInterval[];
  /** From most to least weathered. */
  weatheringOrder?: readonly string[];
  intervals?: readonly CoreInterval[];
  /** Short names written on group runs. */
  groups?: readonly Category[];
  structures?: readonly CoreStructure[];
  gradeLabel?: string;
  /** The stretch asked about: framed in copper. */
  framed?: DepthInterval | null;
}

interface Track {
  name: string;
  size: number;
}

/** One hole drawn as core, with as many tracks as there are data: rock, weathering, group, grade, structure. */
export function HoleStrip(props: HoleStripProps) {
  const isVertical = props.orientation === 'vertical';
  return (
    <ChartFrame {...props} usualHeight={isVertical ? 420 : 136}>
      {(box) => <Drawing box={box} props={props} />}
    </ChartFrame>
  );
}

function tracksOf({ structures = [], weathering = [], intervals = [], gradeLabel = 'grade' }: HoleStripProps): Track[] {
  return [
    ...(structures.length > 0 ? [{ name: 'structure', size: 0.5 }] : []),
    { name: 'rock', size: 1 },
    ...(weathering.length > 0 ? [{ name: 'weathering', size: 0.7 }] : []),
    ...(intervals.some(({ groupSlot }) => groupSlot !== null) ? [{ name: 'group', size: 1 }] : []),
    ...(intervals.some(({ grade }) => grade !== null) ? [{ name: gradeLabel, size: 1.3 }] : []),
  ];
}

const FOOT_LINE_PX = 16;

/** The order of the tracks, and what the shades of weathering mean. */
function footWords({ orientation, weatheringOrder = [], weathering = [] }: HoleStripProps, tracks: readonly Track[], widthPx: number): string[] {
  const order = `${tracks.map(({ name }) => name).join(', ')}: ${orientation === 'vertical' ? 'left to right' : 'top to bottom'}`;
  const shades = weathering.length > 0 && weatheringOrder.length > 1 ? [`weathering from dark to pale: ${weatheringOrder.join(', ')}`] : [];
  return [order, ...shades].map((line) => fitText(line, widthPx, LABEL_PX));
}

const RULER_PX = { horizontal: 18, vertical: 46 };

function Drawing({ box, props }: { box: Box; props: HoleStripProps }) {
  const { fromM, toM, orientation = 'horizontal', framed } = props;
  const prefix = useId();
  const isVertical = orientation === 'vertical';
  const tracks = tracksOf(props);
  const words = footWords(props, tracks, box.width - 8);
  const foot = 4 + words.length * FOOT_LINE_PX;
  const length = (isVertical ? box.height - foot : box.width) - 10;
  const place = laid(props, 5, length);
  const across = (isVertical ? box.width : box.height - foot) - RULER_PX[orientation] - 8;
  const total = tracks.reduce((sum, { size }) => sum + size, 0) + (tracks.length - 1) * 0.16;
  const unit = across / total;
  const starts = tracks.map((_track, index) => RULER_PX[orientation] + 4 + unit * tracks.slice(0, index).reduce((sum, { size }) => sum + size + 0.16, 0));
  const trough = place.rect(fromM, toM, RULER_PX[orientation], RULER_PX[orientation] + across + 8);
  const clip = useId();
  return (
    <g>
      <RockPatternDefs prefix={prefix} />
      <HollowSlotDefs prefix={prefix} />
      <clipPath id={clip}>
        <rect {...trough} />
      </clipPath>
      <Ruler props={props} place={place} length={length} />
      <rect x={trough.x - (isVertical ? 0 : 3)} y={trough.y - (isVertical ? 3 : 0)} width={trough.width + (isVertical ? 0 : 6)} height={trough.height + (isVertical ? 6 : 0)} rx={3} fill="var(--trough)" stroke="var(--trough-deep)" />
      <g clipPath={`url(#${clip})`}>
        {tracks.map(({ name, size }, index) => (
          <StripTrack key={name} name={name} props={props} place={place} low={starts[index] ?? 0} high={(starts[index] ?? 0) + size * unit} prefix={prefix} />
        ))}
      </g>
      {framed !== undefined && framed !== null && (
        <rect {...place.rect(framed.fromM, framed.toM, RULER_PX[orientation] - 3, RULER_PX[orientation] + across + 11)} rx={2} fill="none" stroke="var(--copper)" strokeWidth={2.5} />
      )}
      {words.map((line, index) => (
        <text key={line} x={isVertical ? 0 : 5} y={box.height - 5 - (words.length - 1 - index) * FOOT_LINE_PX} style={captionText}>
          {line}
        </text>
      ))}
    </g>
  );
}

function Ruler({ props, place, length }: { props: HoleStripProps; place: Laid; length: number }) {
  const { fromM, toM, orientation = 'horizontal' } = props;
  const end = RULER_PX[orientation];
  return (
    <g>
      {rulerMarks([fromM, toM], place.isVertical ? length * 2.4 : length).map(({ depthM, label }) => {
        const at = place.along(depthM);
        const long = label === null ? 5 : 12;
        if (place.isVertical) {
          return (
            <g key={depthM}>
              <line x1={end - long / 2 - 3} x2={end - 3} y1={at} y2={at} stroke="var(--rule-firm)" />
              {label !== null && (
                <text x={end - 11} y={Math.max(9, at)} dy="0.35em" textAnchor="end" style={tickText}>
                  {label}
                </text>
              )}
            </g>
          );
        }
        const fits = label !== null && at + 3 + textWidth(label, TICK_PX) < place.along(toM) + 5;
        return (
          <g key={depthM}>
            <line x1={at} x2={at} y1={end - 2 - long} y2={end - 2} stroke="var(--rule-firm)" />
            {fits && (
              <text x={at + 3} y={11} style={tickText}>
                {label}
              </text>
            )}
          </g>
        );
      })}
    </g>
  );
}
