import { plotArea, XAxis, YAxis } from './axes.tsx';
import { captionText, TICK_PX, tickText } from './chart-styles.ts';
import { ChartFrame } from './chart-frame.tsx';
import type { Box, ChartBasics } from './chart-types.ts';
import { markPath } from './category-marks.tsx';
import { legendHeight, SvgLegend } from './svg-legend.tsx';
import { textWidth } from './text-width.ts';
import { linearTicks } from './ticks.ts';

/** Eigenvalues expected by chance, one a component, to set the real ones against. */
export interface ScreeThreshold {
  label: string;
  values: readonly number[];
}

export interface ScreeProps extends ChartBasics {
  eigenvalues: readonly number[];
  /** Broken stick, parallel analysis; the first is dashed, the second dotted. */
  thresholds?: readonly ScreeThreshold[];
  /** Components kept: their bars are solid, and copper marks the last. */
  keep?: number | null;
  onKeep?: (count: number) => void;
  valueLabel?: string;
  /** What the shares written on the bars are of; the sum of the eigenvalues given when absent. */
  total?: number;
}

const DASHES = ['6 3', '1.5 3', '8 3 1.5 3'];

/** Eigenvalues as bars with what chance would give, to choose how many components to keep. */
export function Scree(props: ScreeProps) {
  return (
    <ChartFrame {...props} usualHeight={240}>
      {(box) => <Drawing box={box} props={props} />}
    </ChartFrame>
  );
}

function Drawing({ box, props }: { box: Box; props: ScreeProps }) {
  const { eigenvalues, thresholds = [], keep = null, valueLabel = 'eigenvalue', onKeep } = props;
  const samples = thresholds.map(({ label }, index) => ({ label, dash: DASHES[index % DASHES.length] ?? '6 3' }));
  const top = 22 + legendHeight(thresholds.map(({ label }) => label), box.width - 60);
  const highest = Math.max(...eigenvalues, ...thresholds.flatMap(({ values }) => values), 1e-12);
  const yDomain = [0, highest * 1.04] as const;
  const yTicks = linearTicks(yDomain, { lengthPx: box.height - top - 45, vertical: true, most: 5 });
  const area = plotArea({ ...box, yTicks, xLabel: 'component', yLabel: valueLabel, top });
  const pitch = area.width / Math.max(1, eigenvalues.length);
  const x = (component: number) => area.left + (component - 0.5) * pitch;
  const y = (value: number) => area.top + area.height * (1 - value / yDomain[1]);
  const total = props.total ?? eigenvalues.reduce((sum, value) => sum + value, 0);
  const shares = eigenvalues.map((value) => percent(value / total));
  const sharesFit = pitch > 4 + Math.max(...shares.map((text) => textWidth(text, TICK_PX)));
  const every = Math.max(1, Math.ceil(18 / pitch));
  const xTicks = eigenvalues.map((_value, i) => ({ value: i + 1, label: String(i + 1) })).filter(({ value }) => (value - 1) % every === 0);
  return (
    <g>
      <SvgLegend samples={samples} x={area.left} y={2} width={box.width - 60} />
      <YAxis area={area} ticks={yTicks} at={y} label={valueLabel} />
      {eigenvalues.map((value, index) => {
        const isKept = keep !== null && index < keep;
        return (
          <g key={index}>
            <rect
              x={x(index + 1) - pitch * 0.34}
              y={y(value)}
              width={pitch * 0.68}
              height={area.top + area.height - y(value)}
              fill="var(--ink-3)"
              fillOpacity={isKept || keep === null ? 1 : 0.3}
              stroke="var(--ink-3)"
              strokeWidth={0.7}
            />
            {sharesFit && (
              <text x={x(index + 1)} y={Math.min(y(value), ...thresholds.map(({ values }) => y(values[index] ?? 0))) - 5} textAnchor="middle" style={tickText}>
                {shares[index]}
              </text>
            )}
          </g>
        );
      })}
      {thresholds.map(({ label, values }, index) => (
        <g key={label}>
          <path d={`M${values.map((value, i) => `${x(i + 1)} ${y(value)}`).join('L')}`} fill="none" stroke="var(--ink)" strokeWidth={1.4} strokeDasharray={DASHES[index % DASHES.length]} />
          <path d={values.map((value, i) => markPath(index === 0 ? 1 : 2, 2, x(i + 1), y(value))).join('')} fill="var(--ink)" stroke="var(--sheet)" strokeWidth={0.7} />
        </g>
      ))}
      <XAxis area={area} ticks={xTicks} at={x} grid={false} label="component" />
      {keep !== null && keep > 0 && keep < eigenvalues.length && (
        <g>
          <line x1={x(keep + 0.5)} x2={x(keep + 0.5)} y1={area.top - 6} y2={area.top + area.height} stroke="var(--copper)" strokeWidth={1.5} />
          <text x={x(keep + 0.5) + 5} y={area.top + 2} style={{ ...captionText, fill: 'var(--copper)', fontWeight: 600 }}>
            {keep} kept
          </text>
        </g>
      )}
      {onKeep !== undefined &&
        eigenvalues.map((_value, index) => (
          <rect key={index} data-screen-only="" x={x(index + 1) - pitch / 2} y={area.top} width={pitch} height={area.height} fill="transparent" style={{ cursor: 'pointer' }} onClick={() => onKeep(index + 1)} />
        ))}
    </g>
  );
}

function percent(share: number): string {
  const value = share * 100;
  return `${value >= 9.95 ? value.toFixed(0) : value.toFixed(1)}\u2009%`;
}
