import { kernelDensityEstimation } from 'simple-statistics';
import { scaleLinear } from 'd3';
import { useMemo } from 'react';
import { plotArea, XAxis } from './axes.tsx';
import { slotColours } from './category-marks.tsx';
import { captionText, halo, LABEL_PX, strongLabel, TICK_PX } from './chart-styles.ts';
import { ChartFrame } from './chart-frame.tsx';
import type { Box, ChartBasics, ScaleKind } from './chart-types.ts';
import { fromShare, toShare } from './scatter-points.ts';
import { fitText, textWidth } from './text-width.ts';
import { axisTicks, niceDomain } from './ticks.ts';

export interface Ridge {
  /** "before: 2100" */
  label: string;
  /** "n = 735, mixed" */
  note?: string;
  /** Grey when absent. */
  slot?: number | null;
  values: ArrayLike<number>;
  /** A curve worked out before, highest point 1: drawn instead of one from `values`. */
  curve?: { at: readonly number[]; height: readonly number[] };
}

export interface DensityRidgesProps extends ChartBasics {
  ridges: readonly Ridge[];
  kind?: ScaleKind;
  valueLabel: string;
  domain?: readonly [number, number];
}

const STEPS = 160;
const MOST_VALUES = 2_000;

/** Every k-th value, so that a smooth curve of a large set stays quick. */
function sampled(values: readonly number[]): number[] {
  const every = Math.max(1, Math.ceil(values.length / MOST_VALUES));
  return values.filter((_value, index) => index % every === 0);
}

/** Gaussian kernel density of the value (of its log on a log axis) along a domain, highest point 1. */
export function ridgeCurve(values: ArrayLike<number>, kind: ScaleKind, domain: readonly [number, number]): number[] {
  const forward = (value: number) => (kind === 'log' ? Math.log(value) : value);
  const kept = sampled(Array.from(values, forward).filter(Number.isFinite));
  const isFlat = kept.every((value) => value === kept[0]);
  if (kept.length < 2 || isFlat) return [];
  const density = kernelDensityEstimation(kept, 'gaussian', 'nrd');
  const heights = Array.from({ length: STEPS + 1 }, (_value, i) => density(forward(fromShare(i / STEPS, kind, domain))));
  const highest = Math.max(...heights);
  return highest > 0 ? heights.map((height) => height / highest) : [];
}

/** A given curve read at the steps of a domain, straight between its points, 0 beyond its ends. */
function resampled({ at, height }: NonNullable<Ridge['curve']>, kind: ScaleKind, domain: readonly [number, number]): number[] {
  const read = scaleLinear([...at], [...height]);
  const [first = 0, last = 0] = [at[0], at.at(-1)];
  return Array.from({ length: STEPS + 1 }, (_value, i) => {
    const value = fromShare(i / STEPS, kind, domain);
    return value < first || value > last ? 0 : read(value);
  });
}

/** Distributions one under the other on one scale, each drawn to one height. */
export function DensityRidges(props: DensityRidgesProps) {
  const { ridges, kind = 'linear' } = props;
  const [low, high] = props.domain ?? [];
  const drawn = useMemo(() => {
    const all = ridges.flatMap(({ values }) => Array.from(values));
    const domain = low === undefined || high === undefined ? niceDomain(all, kind, 0.06) : ([low, high] as const);
    return { domain, curves: ridges.map(({ values, curve }) => (curve ? resampled(curve, kind, domain) : ridgeCurve(values, kind, domain))) };
  }, [ridges, kind, low, high]);
  return (
    <ChartFrame {...props} usualHeight={56 + ridges.length * 68}>
      {(box) => <Drawing box={box} props={props} domain={drawn.domain} curves={drawn.curves} />}
    </ChartFrame>
  );
}

interface DrawingProps {
  box: Box;
  props: DensityRidgesProps;
  domain: readonly [number, number];
  curves: readonly (readonly number[])[];
}

function Drawing({ box, props, domain, curves }: DrawingProps) {
  const { ridges, kind = 'linear', valueLabel } = props;
  const wanted = Math.max(...ridges.map(({ label, note = '' }) => Math.max(textWidth(label, LABEL_PX, 'bold'), textWidth(note, LABEL_PX))));
  const words = Math.min(wanted, box.width * 0.32);
  const area = { ...plotArea({ ...box, yTicks: [], xLabel: valueLabel }), left: words + 14, width: Math.max(20, box.width - words - 28) };
  const pitch = area.height / Math.max(1, ridges.length);
  const x = (share: number) => area.left + share * area.width;
  return (
    <g>
      <XAxis area={area} ticks={axisTicks(kind, domain, { lengthPx: area.width })} at={(value) => x(toShare(value, kind, domain))} line={false} label={valueLabel} />
      {ridges.map((ridge, index) => {
        const base = area.top + (index + 1) * pitch - 1;
        const paint = ridge.slot === undefined || ridge.slot === null ? { fill: 'var(--ink-3)', edge: 'var(--ink-2)' } : slotColours(ridge.slot);
        const line = (curves[index] ?? []).map((height, i) => `${x(i / STEPS).toFixed(1)} ${(base - height * pitch * 0.88).toFixed(1)}`);
        return (
          <g key={ridge.label}>
            {line.length > 0 && <path d={`M${x(0)} ${base}L${line.join('L')}L${x(1)} ${base}Z`} fill={paint.fill} fillOpacity={0.24} />}
            {line.length > 0 && <path d={`M${line.join('L')}`} fill="none" stroke={paint.edge} strokeWidth={1.5} />}
            <line x1={area.left} x2={area.left + area.width} y1={base} y2={base} stroke={paint.edge} strokeWidth={1.2} />
            {line.length === 0 && (
              <text x={area.left + 8} y={base - 6} style={{ ...captionText, ...halo }}>
                too few values for a curve
              </text>
            )}
            <text x={area.left - 7} y={base - 20} textAnchor="end" style={strongLabel}>
              {fitText(ridge.label, words, LABEL_PX, 'bold')}
            </text>
            <text x={area.left - 7} y={base - 6} textAnchor="end" style={captionText}>
              {fitText(ridge.note ?? '', words, TICK_PX)}
            </text>
          </g>
        );
      })}
    </g>
  );
}
