import { axisTitle, LABEL_PX, tickText, TICK_PX } from './chart-styles.ts';
import type { PlotArea, Tick } from './chart-types.ts';
import { textWidth, wrapText } from './text-width.ts';

const LINE_PX = 15;

interface RoomOptions {
  width: number;
  height: number;
  yTicks: readonly Tick[];
  xLabel?: string;
  yLabel?: string;
  top?: number;
  right?: number;
}

/** Room left for marks once tick labels and axis titles have theirs. */
export function plotArea({ width, height, yTicks, xLabel, yLabel, top = 8, right = 14 }: RoomOptions): PlotArea {
  const widest = Math.max(12, ...yTicks.map((tick) => textWidth(tick.label, TICK_PX)));
  const left = Math.ceil(widest) + 9 + (yLabel === undefined ? 0 : yTitleLines(yLabel, height).length * LINE_PX + 3);
  const bottom = 20 + (xLabel === undefined ? 0 : LINE_PX + 3);
  return { left, top, width: Math.max(20, width - left - right), height: Math.max(20, height - top - bottom) };
}

function yTitleLines(label: string, height: number): string[] {
  return wrapText(label, Math.max(60, height - 24), LABEL_PX, 2);
}

interface AxisProps {
  area: PlotArea;
  ticks: readonly Tick[];
  at: (value: number) => number;
  label?: string;
  grid?: boolean;
  line?: boolean;
}

/** Baseline with ticks, labels and the title below; the grid runs up through the plot. */
export function XAxis({ area, ticks, at, label, grid = true, line = true }: AxisProps) {
  const base = area.top + area.height;
  const lineWidth = line ? 1 : 0;
  const fullWidth = area.left + area.width;
  return (
    <g>
      {grid && ticks.map((tick) => <GridLine key={tick.value} x1={at(tick.value)} x2={at(tick.value)} y1={area.top} y2={base} />)}
      <line x1={area.left} x2={fullWidth} y1={base} y2={base} stroke="var(--rule-firm)" strokeWidth={lineWidth} />
      {ticks.map((tick) => (
        <g key={tick.value}>
          <line x1={at(tick.value)} x2={at(tick.value)} y1={base} y2={base + 4} stroke="var(--rule-firm)" strokeWidth={lineWidth} />
          <text x={at(tick.value)} y={base + 15} textAnchor="middle" style={tickText}>
            {tick.label}
          </text>
        </g>
      ))}
      {label !== undefined && <XTitle area={area} label={label} />}
    </g>
  );
}

function XTitle({ area, label }: { area: PlotArea; label: string }) {
  const roomPx = area.width + area.left;
  const [text = ''] = wrapText(label, roomPx, LABEL_PX, 1);
  const half = textWidth(text, LABEL_PX) / 2;
  const middle = Math.max(half, Math.min(area.left + area.width / 2, area.left + area.width + 10 - half));
  return (
    <text x={middle} y={area.top + area.height + 31} textAnchor="middle" style={axisTitle}>
      {text}
    </text>
  );
}

/** Left axis with ticks, labels and the title turned upwards; the grid runs across. */
export function YAxis({ area, ticks, at, label, grid = true, line = true }: AxisProps) {
  const base = area.top + area.height;
  const lines = label === undefined ? [] : yTitleLines(label, base + 20);
  return (
    <g>
      {grid && ticks.map((tick) => <GridLine key={tick.value} x1={area.left} x2={area.left + area.width} y1={at(tick.value)} y2={at(tick.value)} />)}
      {line && <line x1={area.left} x2={area.left} y1={area.top} y2={base} stroke="var(--rule-firm)" />}
      {ticks.map((tick) => (
        <g key={tick.value}>
          {line && <line x1={area.left - 4} x2={area.left} y1={at(tick.value)} y2={at(tick.value)} stroke="var(--rule-firm)" />}
          <text x={area.left - 7} y={at(tick.value)} dy="0.35em" textAnchor="end" style={tickText}>
            {tick.label}
          </text>
        </g>
      ))}
      {lines.map((text, index) => (
        <text
          key={text}
          transform={`translate(${11 + index * LINE_PX} ${area.top + area.height / 2}) rotate(-90)`}
          textAnchor="middle"
          style={axisTitle}
        >
          {text}
        </text>
      ))}
    </g>
  );
}

function GridLine(place: { x1: number; x2: number; y1: number; y2: number }) {
  return <line {...place} stroke="var(--rule)" strokeWidth={0.75} opacity={0.75} />;
}

/** Zero of a linear axis, dotted, where it lies inside the plot. */
export function ZeroLine({ area, at, along }: { area: PlotArea; at: number; along: 'x' | 'y' }) {
  const inX = at >= area.left && at <= area.left + area.width;
  const inY = at >= area.top && at <= area.top + area.height;
  if (along === 'x' ? !inX : !inY) return null;
  const place =
    along === 'x'
      ? { x1: at, x2: at, y1: area.top, y2: area.top + area.height }
      : { x1: area.left, x2: area.left + area.width, y1: at, y2: at };
  return <line {...place} stroke="var(--ink-3)" strokeDasharray="1 3" />;
}
