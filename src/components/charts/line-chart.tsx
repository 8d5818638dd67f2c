import { plotArea, XAxis, YAxis, ZeroLine } from './axes.tsx';
import { markPath } from './category-marks.tsx';
import { axisTitle, halo, LABEL_PX, TICK_PX, type } from './chart-styles.ts';
import { ChartFrame } from './chart-frame.tsx';
import type { Box, ChartBasics, PlotArea, ScaleKind, Tick } from './chart-types.ts';
import { lineLabels } from './line-labels.ts';
import { toShare } from './scatter-points.ts';
import { textWidth } from './text-width.ts';
import { axisTicks, linearTicks, niceDomain } from './ticks.ts';

export interface LinePoint {
  x: number;
  y: number;
  /** Interval of confidence. */
  low?: number;
  high?: number;
}

export interface LineSeries {
  label: string;
  points: readonly LinePoint[];
}

/** One picture of the stack: series that share a unit. */
export interface LinePanel {
  yLabel?: string;
  series: readonly LineSeries[];
  yDomain?: readonly [number, number];
}

export interface LineChartProps extends ChartBasics {
  /** Stacked on one x axis; never a second y axis. */
  panels: readonly LinePanel[];
  xLabel: string;
  /** Only whole numbers on the x axis, all of them where they fit. */
  wholeX?: boolean;
  xKind?: ScaleKind;
  /** The x chosen: a copper wash behind it. */
  chosen?: number | null;
  /** A click takes the nearest x. */
  onChoose?: (x: number) => void;
}

/** Series differ by dash and mark, and are named on the line. */
const DASHES = [undefined, '5 3', '1.5 3', '8 3 1.5 3'];
const MARK_SLOTS = [1, 2, 3, 4];
const STROKES = ['var(--ink)', 'var(--ink-2)', 'var(--ink-2)', 'var(--ink-3)'];
const PANEL_GAP = 14;
/** Room above a panel for its name, where that is too long to stand on the line. */
const HEAD_PX = 14;
/** Share of the width a name on the line may take. */
const LONG_NAME = 0.6;

/** Lines over one x axis, in panels one under the other. */
export function LineChart(props: LineChartProps) {
  return (
    <ChartFrame {...props} usualHeight={60 + props.panels.length * 120}>
      {(box) => <Drawing box={box} props={props} />}
    </ChartFrame>
  );
}

function panelDomain({ series, yDomain }: LinePanel): readonly [number, number] {
  return yDomain ?? niceDomain(series.flatMap(({ points }) => points.flatMap(({ y, low = y, high = y }) => [y, low, high])), 'linear', 0.12);
}

function xTicksOf(values: readonly number[], domain: readonly [number, number], kind: ScaleKind, whole: boolean, lengthPx: number): Tick[] {
  const all = values.map((value) => ({ value, label: String(value) }));
  const roomy = all.length > 1 && lengthPx / (all.length - 1) > 8 + Math.max(...all.map(({ label }) => textWidth(label, TICK_PX)));
  if (whole && roomy && all.length <= 16) return all;
  const found = axisTicks(kind, domain, { lengthPx });
  return whole ? found.filter(({ value }) => Number.isInteger(value)) : found;
}

function Drawing({ box, props }: { box: Box; props: LineChartProps }) {
  const { panels, xLabel, wholeX = false, xKind = 'linear', chosen, onChoose } = props;
  const xs = [...new Set(panels.flatMap(({ series }) => series.flatMap(({ points }) => points.map(({ x }) => x))))].sort((a, b) => a - b);
  const xDomain = niceDomain(xs, xKind, 0.03);
  const rows = panels.map((panel) => {
    const domain = panelDomain(panel);
    return { panel, domain, ticks: linearTicks(domain, { lengthPx: (box.height - 60) / panels.length, vertical: true, most: panels.length > 1 ? 4 : 6 }) };
  });
  const yLabel = panels.some((panel) => panel.yLabel !== undefined) ? 'y' : undefined;
  const isHeaded = panels.length > 1 && panels.every(({ series }) => series.length === 1) && panels.some(({ series }) => textWidth(series[0]?.label ?? '', LABEL_PX) > LONG_NAME * (box.width - 50));
  const [top, gap] = isHeaded ? [10 + HEAD_PX, PANEL_GAP + HEAD_PX] : [10, PANEL_GAP];
  const whole = plotArea({ ...box, yTicks: rows.flatMap(({ ticks }) => ticks), xLabel, ...(yLabel === undefined ? {} : { yLabel }), top });
  const height = (whole.height - gap * (panels.length - 1)) / panels.length;
  const x = (value: number) => whole.left + toShare(value, xKind, xDomain) * whole.width;
  const step = xs.length > 1 ? Math.min(...xs.slice(1).map((value, i) => x(value) - x(xs[i] ?? value))) : 30;
  const xTicks = xTicksOf(xs, xDomain, xKind, wholeX, whole.width);
  const nearest = (px: number) => xs.reduce((best, value) => (Math.abs(x(value) - px) < Math.abs(x(best) - px) ? value : best), xs[0] ?? 0);
  return (
    <g>
      {chosen !== undefined && chosen !== null && (
        <rect x={x(chosen) - Math.min(step, 30) / 2} y={whole.top - 6} width={Math.min(step, 30)} height={whole.height + 6} fill="var(--copper-wash)" />
      )}
      <XAxis area={whole} ticks={xTicks.map((tick) => ({ ...tick }))} at={x} grid={false} label={xLabel} />
      {rows.map(({ panel, domain, ticks }, index) => (
        <Panel key={index} panel={panel} ticks={ticks} domain={domain} x={x} area={{ ...whole, top: whole.top + index * (height + gap), height }} isHeaded={isHeaded} />
      ))}
      {chosen !== undefined && chosen !== null && <ChosenTick x={x(chosen)} y={whole.top + whole.height + 15} label={String(chosen)} />}
      {onChoose !== undefined && (
        <rect
          data-screen-only=""
          x={whole.left}
          y={whole.top}
          width={whole.width}
          height={whole.height}
          fill="transparent"
          style={{ cursor: 'pointer' }}
          onClick={(event) => onChoose(nearest(event.clientX - event.currentTarget.getBoundingClientRect().left + whole.left))}
        />
      )}
    </g>
  );
}

/** The chosen x is written in bold over its plain tick. */
function ChosenTick({ x, y, label }: { x: number; y: number; label: string }) {
  return (
    <text x={x} y={y} textAnchor="middle" style={{ ...type('ui', 600, TICK_PX), fill: 'var(--ink)', ...halo }}>
      {label}
    </text>
  );
}

interface PanelProps {
  panel: LinePanel;
  domain: readonly [number, number];
  ticks: readonly Tick[];
  area: PlotArea;
  x: (value: number) => number;
  /** Its one name stands above it, not on the line. */
  isHeaded: boolean;
}

function Panel({ panel, domain, ticks, area, x, isHeaded }: PanelProps) {
  const y = (value: number) => area.top + (1 - toShare(value, 'linear', domain)) * area.height;
  const drawn = panel.series.map(({ label, points }) => ({
    label,
    points: points.filter((point) => Number.isFinite(point.y)).map((point) => ({ ...point, px: x(point.x), py: y(point.y) })),
  }));
  const labels = isHeaded ? [] : lineLabels(drawn, { x: area.left, y: area.top - 8, width: area.width + 12, height: area.height + 8 });
  return (
    <g>
      <YAxis area={area} ticks={ticks} at={y} {...(panel.yLabel === undefined ? {} : { label: panel.yLabel })} line={false} />
      <ZeroLine area={area} at={y(0)} along="y" />
      {drawn.map(({ label, points }, index) => (
        <g key={label}>
          {points.some(({ low, high }) => low !== undefined && high !== undefined) && (
            <path
              d={`M${points.map(({ px, high, y: value }) => `${px} ${y(high ?? value)}`).join('L')}L${[...points].reverse().map(({ px, low, y: value }) => `${px} ${y(low ?? value)}`).join('L')}Z`}
              fill="var(--ink-3)"
              opacity={0.25}
            />
          )}
          {points.length > 1 && (
            <path
              d={`M${points.map(({ px, py }) => `${px} ${py}`).join('L')}`}
              fill="none"
              stroke={STROKES[index % STROKES.length]}
              strokeWidth={1.5}
              strokeDasharray={DASHES[index % DASHES.length]}
            />
          )}
          <path d={points.map(({ px, py }) => markPath(MARK_SLOTS[index % MARK_SLOTS.length] ?? 1, 2.3, px, py)).join('')} fill={STROKES[index % STROKES.length]} />
        </g>
      ))}
      {isHeaded && (
        <text x={area.left} y={area.top - 8} style={{ ...axisTitle, fill: 'var(--ink)', ...halo }}>
          {panel.series[0]?.label}
        </text>
      )}
      {labels.map(({ id, x: lx, y: ly }) => (
        <text key={id} x={lx} y={ly} dy="0.35em" textAnchor="middle" style={{ ...axisTitle, fill: 'var(--ink)', ...halo }}>
          {id}
        </text>
      ))}
    </g>
  );
}
