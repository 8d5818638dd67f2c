import { useMemo } from 'react';
import { plotArea, XAxis, YAxis } from './axes.tsx';
import { slotColours } from './category-marks.tsx';
import { captionText, halo, LABEL_PX } from './chart-styles.ts';
import { ChartFrame } from './chart-frame.tsx';
import type { Box, ChartBasics, PlotArea, ScaleKind } from './chart-types.ts';
import { histogramBins } from './histogram-bins.ts';
import type { Bin } from './histogram-bins.ts';
import { spreadAlong } from './label-placement.ts';
import { componentDash, mixtureDensity } from './mixture.ts';
import type { MixtureComponent } from './mixture.ts';
import { fromShare, toShare } from './scatter-points.ts';
import { legendHeight, SvgLegend } from './svg-legend.tsx';
import { textWidth } from './text-width.ts';
import { axisTicks, linearTicks } from './ticks.ts';

/** A value marked across the plot: a cap, a cut-off, a mean. Copper marks what is chosen. */
export interface ValueMark {
  value: number;
  label: string;
  isChosen?: boolean;
}

export interface HistogramProps extends ChartBasics {
  values: ArrayLike<number>;
  /** Lengths in metres; equal when absent. */
  weights?: ArrayLike<number>;
  kind?: ScaleKind;
  valueLabel: string;
  /** Left axis: "share of metres, %". */
  shareLabel?: string;
  slot?: number | null;
  binCount?: number;
  /** Populations on the axis drawn: of ln(value) where it is log. */
  components?: readonly MixtureComponent[];
  componentWords?: readonly string[];
  sumWord?: string;
  marks?: readonly ValueMark[];
}

/** Shares of length by value, with the fitted populations and values marked. */
export function Histogram(props: HistogramProps) {
  const { values, weights, kind = 'linear', binCount } = props;
  const bins = useMemo(() => histogramBins(values, weights, kind, binCount), [values, weights, kind, binCount]);
  return (
    <ChartFrame {...props} usualHeight={280}>
      {(box) => (bins.length === 0 ? <Empty box={box} /> : <Drawing box={box} bins={bins} props={props} />)}
    </ChartFrame>
  );
}

function Empty({ box }: { box: Box }) {
  return (
    <text x={box.width / 2} y={box.height / 2} textAnchor="middle" style={captionText}>
      No value to draw.
    </text>
  );
}

const inScale = (value: number, kind: ScaleKind) => (kind === 'log' ? Math.log(value) : value);

function Drawing({ box, bins, props }: { box: Box; bins: readonly Bin[]; props: HistogramProps }) {
  const { kind = 'linear', components = [], componentWords = [], sumWord = 'together', marks = [], slot, shareLabel = 'share of metres, %' } = props;
  const xDomain = [bins[0]?.from ?? 0, bins.at(-1)?.to ?? 1] as const;
  const binWidth = inScale(bins[0]?.to ?? 1, kind) - inScale(bins[0]?.from ?? 0, kind);
  const steps = Array.from({ length: 121 }, (_value, i) => fromShare(i / 120, kind, xDomain));
  const height = (value: number, of: readonly MixtureComponent[]) => mixtureDensity(inScale(value, kind), of) * binWidth;
  const highest = Math.max(...bins.map(({ share }) => share), ...(components.length > 0 ? steps.map((value) => height(value, components)) : []));
  const samples = [
    ...components.map((component, index) => ({ label: componentWords[index] ?? component.label, dash: componentDash(index) })),
    ...(components.length > 1 ? [{ label: sumWord, stroke: 'var(--copper)' }] : []),
  ];
  const top = 8 + legendHeight(samples.map(({ label }) => label), box.width - 60) + (marks.length > 0 ? 18 : 0);
  const yDomain = [0, highest * 105] as const;
  const yTicks = linearTicks(yDomain, { lengthPx: box.height - top - 45, vertical: true, most: 5 });
  const area = plotArea({ ...box, yTicks, xLabel: 'value', yLabel: shareLabel, top });
  const x = (value: number) => area.left + toShare(value, kind, xDomain) * area.width;
  const y = (share: number) => area.top + area.height * (1 - (share * 100) / yDomain[1]);
  const curve = (of: readonly MixtureComponent[]) => `M${steps.map((value) => `${x(value).toFixed(1)} ${y(height(value, of)).toFixed(1)}`).join('L')}`;
  const paint = slot === undefined || slot === null ? { fill: 'var(--ink-3)', edge: 'var(--ink-3)' } : slotColours(slot);
  return (
    <g>
      <SvgLegend samples={samples} x={area.left} y={2} width={box.width - 60} />
      <YAxis area={area} ticks={yTicks} at={(percent) => y(percent / 100)} label={shareLabel} />
      {bins.map(({ from, to, share }) => (
        <rect
          key={from}
          x={x(from) + 0.5}
          y={y(share)}
          width={Math.max(0.5, x(to) - x(from) - 1)}
          height={area.top + area.height - y(share)}
          fill={paint.fill}
          stroke={paint.edge}
          strokeWidth={0.7}
          fillOpacity={slot === undefined || slot === null ? 0.45 : 0.6}
        />
      ))}
      <XAxis area={area} ticks={axisTicks(kind, xDomain, { lengthPx: area.width })} at={x} grid={false} label={props.valueLabel} />
      <g fill="none" strokeWidth={1.5}>
        {components.map((component, index) => (
          <path key={component.label} d={curve([component])} stroke="var(--ink)" strokeDasharray={componentDash(index)} />
        ))}
        {components.length > 1 && <path d={curve(components)} stroke="var(--copper)" strokeWidth={1.7} />}
      </g>
      <ValueMarks marks={marks.filter(({ value }) => value >= xDomain[0] && value <= xDomain[1])} area={area} x={x} />
    </g>
  );
}

/** Upright lines with their words above the plot, moved apart where they would touch. */
export function ValueMarks({ marks, area, x }: { marks: readonly ValueMark[]; area: PlotArea; x: (value: number) => number }) {
  const widths = marks.map(({ label }) => textWidth(label, LABEL_PX, 'bold'));
  const middles = spreadAlong(marks.map(({ value }) => x(value)), widths, 6, area.left - 30, area.left + area.width + 12);
  return (
    <g>
      {marks.map(({ value, label, isChosen = false }, index) => {
        const colour = isChosen ? 'var(--copper)' : 'var(--ink-2)';
        return (
          <g key={label}>
            <line x1={x(value)} x2={x(value)} y1={area.top - 4} y2={area.top + area.height} stroke={colour} strokeWidth={1.5} strokeDasharray={isChosen ? undefined : '4 2.5'} />
            <text x={middles[index]} y={area.top - 8} textAnchor="middle" style={{ ...captionText, ...halo, fill: colour, fontWeight: 600 }}>
              {label}
            </text>
          </g>
        );
      })}
    </g>
  );
}
