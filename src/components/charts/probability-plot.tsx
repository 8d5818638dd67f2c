import { useMemo } from 'react';
import type { PointerEvent } from 'react';
import { plotArea, XAxis, YAxis } from './axes.tsx';
import { markPath, slotColours } from './category-marks.tsx';
import { captionText, halo, LABEL_PX, strongLabel } from './chart-styles.ts';
import { ChartFrame } from './chart-frame.tsx';
import type { Box, ChartBasics, PlotArea } from './chart-types.ts';
import { overlaps, type Rect } from './label-placement.ts';
import { componentDash, mixtureCdf } from './mixture.ts';
import type { MixtureComponent } from './mixture.ts';
import { plottingPositions, probabilityGrid, probabilityTicks, thinByPlace } from './probability-scale.ts';
import type { PlottedValue } from './probability-scale.ts';
import { fromShare, toShare } from './scatter-points.ts';
import { legendHeight, SvgLegend } from './svg-legend.tsx';
import { textWidth } from './text-width.ts';
import { logTicks, niceDomain } from './ticks.ts';
import { normalQuantile } from '#kernels/normal.ts';

export interface ProbabilityPlotProps extends ChartBasics {
  /** Grades above zero, any order. */
  values: ArrayLike<number>;
  /** Lengths in metres; equal when absent. */
  weights?: ArrayLike<number>;
  /** Quantity, unit and scale: "Cu, % (log scale)". */
  valueLabel: string;
  /** Slot of the points; grey when absent. */
  slot?: number | null;
  /** Lognormal populations: mean and sd of ln(value). */
  components?: readonly MixtureComponent[];
  /** Words of each component and of their sum for the legend, in order. */
  componentWords?: readonly string[];
  sumWord?: string;
  /** The value at which two populations are equally likely, and its words. */
  evenOdds?: { value: number; label: string } | null;
  /** Share of the weight below the limit of detection, not among the values. */
  censored?: { share: number; label: string } | null;
  hovered?: number | null;
  onHover?: (index: number | null) => void;
}

type Place = { x: (z: number) => number; y: (value: number) => number };

/** Cumulative share of length on a normal scale against grade on a log scale. */
export function ProbabilityPlot(props: ProbabilityPlotProps) {
  const { values, weights, censored } = props;
  const belowShare = censored?.share ?? 0;
  const plotted = useMemo(() => plottingPositions(values, weights, belowShare), [values, weights, belowShare]);
  return (
    <ChartFrame {...props} usualHeight={360}>
      {(box) => <Drawing box={box} plotted={plotted} props={props} />}
    </ChartFrame>
  );
}

function layout(box: Box, plotted: readonly PlottedValue[], { components = [], valueLabel }: ProbabilityPlotProps, top: number) {
  const spread = Math.max(2.4, ...plotted.slice(0, 1).concat(plotted.slice(-1)).map(({ z }) => Math.abs(z))) * 1.05;
  const zDomain = [-spread, spread] as const;
  const yDomain = niceDomain(plotted.map(({ value }) => value).concat(components.map(({ mean }) => Math.exp(mean))), 'log', 0.06);
  const yTicks = logTicks(yDomain, { lengthPx: box.height - top - 45, vertical: true });
  const area = plotArea({ ...box, yTicks, xLabel: 'share', yLabel: valueLabel, top });
  const at: Place = {
    x: (z) => area.left + toShare(z, 'linear', zDomain) * area.width,
    y: (value) => area.top + (1 - toShare(value, 'log', yDomain)) * area.height,
  };
  return { zDomain, yDomain, yTicks, area, at };
}

function Drawing({ box, plotted, props }: { box: Box; plotted: readonly PlottedValue[]; props: ProbabilityPlotProps }) {
  const { components = [], componentWords = [], sumWord = 'together', evenOdds, censored, slot, hovered } = props;
  const samples = components.map((component, index) => ({ label: componentWords[index] ?? component.label, dash: componentDash(index) }));
  const legend = components.length > 1 ? [...samples, { label: sumWord, stroke: 'var(--copper)' }] : samples;
  const top = 8 + legendHeight(legend.map(({ label }) => label), box.width - 60);
  const { zDomain, yDomain, yTicks, area, at } = layout(box, plotted, props, top);
  const shown = thinByPlace(plotted, ({ z, value }) => [at.x(z), at.y(value)], 1.2);
  const paint = slot === undefined || slot === null ? { fill: 'var(--ink-3)', edge: 'var(--ink-2)' } : slotColours(slot);
  const lit = hovered === undefined || hovered === null ? undefined : plotted.find(({ index }) => index === hovered);
  const onMove = (event: PointerEvent<SVGRectElement>) => {
    const rect = event.currentTarget.getBoundingClientRect();
    props.onHover?.(nearestByX(plotted, at, event.clientX - rect.left + area.left, event.clientY - rect.top + area.top));
  };
  return (
    <g>
      <SvgLegend samples={legend} x={area.left} y={4} width={box.width - 60} />
      {probabilityGrid(zDomain).map((z) => (
        <line key={z} x1={at.x(z)} x2={at.x(z)} y1={area.top} y2={area.top + area.height} stroke="var(--rule)" strokeWidth={0.75} opacity={0.75} />
      ))}
      <XAxis area={area} ticks={probabilityTicks(zDomain, area.width)} at={at.x} grid={false} label="cumulative share of length, % (normal scale)" />
      <YAxis area={area} ticks={yTicks} at={at.y} label={props.valueLabel} />
      {censored !== undefined && censored !== null && censored.share > 0 && <Censored area={area} at={at} {...censored} />}
      <path
        d={shown.map(({ z, value }) => markPath(1, 2.1, at.x(z), at.y(value))).join('')}
        fill={paint.fill}
        stroke={paint.edge}
        strokeWidth={0.6}
        opacity={0.85}
      />
      <Populations components={components} area={area} at={at} yDomain={yDomain} zDomain={zDomain} evenOdds={evenOdds ?? null} />
      {lit !== undefined && <circle cx={at.x(lit.z)} cy={at.y(lit.value)} r={6} fill="none" stroke="var(--ink)" strokeWidth={1.6} />}
      {props.onHover !== undefined && (
        <rect {...rectOf(area)} fill="transparent" onPointerMove={onMove} onPointerLeave={() => props.onHover?.(null)} />
      )}
      {plotted.length === 0 && (
        <text x={area.left + area.width / 2} y={area.top + area.height / 2} textAnchor="middle" style={captionText}>
          No value above zero to plot.
        </text>
      )}
    </g>
  );
}

const rectOf = ({ left, top, width, height }: PlotArea) => ({ x: left, y: top, width, height });

function nearestByX(plotted: readonly PlottedValue[], at: Place, px: number, py: number): number | null {
  let best = 12;
  let found: number | null = null;
  for (const { index, z, value } of plotted) {
    const apart = Math.hypot(at.x(z) - px, at.y(value) - py);
    if (apart < best) [best, found] = [apart, index];
  }
  return found;
}

interface PopulationsProps {
  components: readonly MixtureComponent[];
  area: PlotArea;
  at: Place;
  yDomain: readonly [number, number];
  zDomain: readonly [number, number];
  evenOdds: { value: number; label: string } | null;
}

type Line = readonly (readonly [number, number])[];

/** Each population as a straight line, named beside it, the fitted sum as a copper curve, and where two are equally likely. */
function Populations({ components, area, at, yDomain, zDomain, evenOdds }: PopulationsProps) {
  if (components.length === 0) return null;
  const steps = Array.from({ length: 81 }, (_value, i) => fromShare(i / 80, 'log', yDomain));
  const sum = steps
    .map((value) => [normalQuantile(Math.min(1 - 1e-9, Math.max(1e-9, mixtureCdf(Math.log(value), components)))), value] as const)
    .filter(([z]) => z >= zDomain[0] && z <= zDomain[1]);
  const line = ({ mean, sd }: MixtureComponent) =>
    steps.map((value) => [(Math.log(value) - mean) / sd, value] as const).filter(([z]) => z >= zDomain[0] && z <= zDomain[1]);
  const lines = components.map(line);
  const oddsY = evenOdds === null ? null : at.y(evenOdds.value);
  const oddsLabel = evenOdds === null || oddsY === null || oddsY < area.top || oddsY > area.top + area.height ? null : clearest(evenOdds.label, oddsY, area, [...lines, sum], at);
  const oddsBand = oddsY === null ? [] : [{ x: area.left, y: oddsY - 3, width: area.width, height: 6 }];
  const path = (points: Line) => `M${points.map(([z, value]) => `${at.x(z).toFixed(1)} ${at.y(value).toFixed(1)}`).join('L')}`;
  return (
    <g fill="none">
      {components.map((component, index) => (
        <path key={component.label} d={path(lines[index] ?? [])} stroke="var(--ink)" strokeWidth={1.5} strokeDasharray={componentDash(index)} />
      ))}
      {components.length > 1 && <path d={path(sum)} stroke="var(--copper)" strokeWidth={1.7} />}
      {components.length > 1 &&
        components.map((component, index) => {
          const place = nameFor(lines[index] ?? [], sum, at, area, oddsLabel ? [...oddsBand, oddsLabel] : oddsBand);
          return (
            place && (
              <text key={component.label} {...place} dy="0.35em" textAnchor="middle" style={{ ...strongLabel, ...halo }}>
                {component.label}
              </text>
            )
          );
        })}
      {evenOdds !== null && oddsLabel !== null && oddsY !== null && (
        <>
          <line x1={area.left} x2={area.left + area.width} y1={oddsY} y2={oddsY} stroke="var(--copper)" strokeDasharray="1.5 3" />
          <text x={oddsLabel.x} y={oddsY - 5} style={{ ...captionText, ...halo, fill: 'var(--copper)', fontWeight: 600 }}>
            {evenOdds.label}
          </text>
        </>
      )}
    </g>
  );
}

/** Room for words above a level line: at its left end or its right, whichever fewer lines cross. */
function clearest(label: string, y: number, area: PlotArea, lines: readonly Line[], at: Place): Rect {
  const width = textWidth(label, LABEL_PX) * 1.05;
  const crossings = (rect: Rect) => lines.flat().filter(([z, value]) => overlaps({ x: at.x(z) - 2, y: at.y(value) - 2, width: 4, height: 4 }, rect)).length;
  const left = { x: area.left + 6, y: y - 18, width, height: 16 };
  const right = { ...left, x: area.left + area.width - width - 6 };
  return crossings(right) < crossings(left) ? right : left;
}

/** Beside a population's line, where it is furthest from the sum, away from the edges and from other words. */
function nameFor(line: Line, sum: Line, at: Place, area: PlotArea, taken: readonly Rect[]) {
  let best: { x: number; y: number } | null = null;
  let widest = 0;
  for (const [z, value] of line) {
    const [x, y] = [at.x(z), at.y(value)];
    if (x < area.left + 24 || x > area.left + area.width - 24 || y < area.top + 22 || y > area.top + area.height - 22) continue;
    const gap = sum.reduce((least, [sz, sv]) => Math.min(least, Math.hypot(at.x(sz) - x, at.y(sv) - y)), Infinity);
    if (gap < widest) continue;
    const above = sum.every(([sz, sv]) => Math.abs(at.x(sz) - x) > 8 || at.y(sv) >= y);
    const middle = above ? y - 13 : y + 13;
    if (taken.some((other) => overlaps({ x: x - 7, y: middle - 8, width: 14, height: 16 }, other))) continue;
    widest = gap;
    best = { x, y: middle };
  }
  return best;
}

function Censored({ area, at, share, label }: { area: PlotArea; at: Place; share: number; label: string }) {
  const edge = Math.min(area.left + area.width, Math.max(area.left, at.x(normalQuantile(share))));
  const insideFits = edge - area.left > textWidth(label, LABEL_PX) + 12;
  return (
    <g>
      <rect x={area.left} y={area.top} width={edge - area.left} height={area.height} fill="var(--trough)" opacity={0.6} />
      <line x1={edge} x2={edge} y1={area.top} y2={area.top + area.height} stroke="var(--ink-3)" strokeDasharray="3 2" />
      <text x={insideFits ? area.left + 6 : edge + 5} y={area.top + area.height - 8} style={{ ...captionText, ...halo, fill: 'var(--ink-2)' }}>
        {label}
      </text>
    </g>
  );
}
