import { axisTitle, halo, tickText, TICK_PX } from './chart-styles.ts';
import { ChartFrame } from './chart-frame.tsx';
import type { Box, ChartBasics } from './chart-types.ts';
import { textWidth } from './text-width.ts';
import { linearTicks } from './ticks.ts';

export interface LoadingsBarsProps extends ChartBasics {
  loadings: readonly { element: string; value: number }[];
  /** Loadings smaller than this are drawn pale; 0 draws all alike. */
  weakBelow?: number;
  axisLabel?: string;
}

const ROW_PX = 15;
const HEAD_PX = 4;
const FOOT_PX = 38;

/** Elements of one component ordered by loading, from the most positive down. */
export function LoadingsBars(props: LoadingsBarsProps) {
  return (
    <ChartFrame {...props} usualHeight={HEAD_PX + FOOT_PX + props.loadings.length * ROW_PX}>
      {(box) => <Drawing box={box} props={props} />}
    </ChartFrame>
  );
}

function Drawing({ box, props }: { box: Box; props: LoadingsBarsProps }) {
  const { weakBelow = 0, axisLabel = 'loading' } = props;
  const rows = [...props.loadings].sort((a, b) => b.value - a.value);
  const reach = Math.max(1e-9, ...rows.map(({ value }) => Math.abs(value))) * 1.05;
  const widest = Math.max(0, ...rows.map(({ element }) => textWidth(element, TICK_PX)));
  const half = Math.max(20, box.width / 2 - 12);
  const x = (value: number) => box.width / 2 + (value / reach) * half;
  const pitch = (box.height - HEAD_PX - FOOT_PX) / Math.max(1, rows.length);
  const base = HEAD_PX + pitch * rows.length;
  const ticks = linearTicks([-reach, reach], { lengthPx: half * 2, most: 5 });
  const every = Math.max(1, Math.ceil(11 / pitch));
  return (
    <g>
      {ticks.map((tick) => (
        <g key={tick.value}>
          <line x1={x(tick.value)} x2={x(tick.value)} y1={HEAD_PX} y2={base} stroke="var(--rule)" strokeWidth={0.75} opacity={0.75} />
          <text x={x(tick.value)} y={base + 15} textAnchor="middle" style={tickText}>
            {tick.label}
          </text>
        </g>
      ))}
      {rows.map(({ element, value }, index) => {
        const middle = HEAD_PX + (index + 0.5) * pitch;
        const isWeak = Math.abs(value) < weakBelow;
        const left = value >= 0;
        return (
          <g key={element}>
            <rect
              x={Math.min(x(0), x(value))}
              y={middle - pitch * 0.36}
              width={Math.abs(x(value) - x(0))}
              height={pitch * 0.72}
              fill="var(--ink-3)"
              fillOpacity={isWeak ? 0.35 : 1}
            />
            {index % every === 0 && (
              <text x={x(0) + (left ? -5 : 5)} y={middle} dy="0.34em" textAnchor={left ? 'end' : 'start'} style={{ ...tickText, ...halo, fill: isWeak ? 'var(--ink-3)' : 'var(--ink)' }}>
                {element}
              </text>
            )}
          </g>
        );
      })}
      <line x1={x(0)} x2={x(0)} y1={HEAD_PX} y2={base} stroke="var(--rule-firm)" />
      <text x={Math.max(widest, box.width / 2)} y={base + 31} textAnchor="middle" style={axisTitle}>
        {axisLabel}
      </text>
    </g>
  );
}
