import type { KeyboardEvent } from 'react';
import { ChartFrame } from './chart-frame.tsx';
import { ChartTooltip } from './chart-tooltip.tsx';
import { LegendRow } from './legend-row.tsx';
import { ScatterCanvas } from './scatter-canvas.tsx';
import { ScatterDrawing } from './scatter-drawing.tsx';
import { drawingNote, scatterMarkup } from './scatter-paint.ts';
import { nearestRow, rowsByRule, rowsInPolygon, toShare } from './scatter-points.ts';
import { ScatterRule } from './scatter-rule.tsx';
import { useScatter } from './use-scatter.ts';
import type { ScatterProps, ScatterState } from './use-scatter.ts';
import { useScatterGesture } from './use-scatter-gesture.ts';

const REACH_PX = 12;
const shortName = (label: string) => label.split(',')[0] ?? label;

/** Points of two variables, up to some 200,000: lasso, box, pan, rule; linked hover and selection. */
export function Scatter(props: ScatterProps) {
  const state = useScatter(props);
  const { points, view, slots, picked } = state;
  const gesture = useGesture(props, state);
  return (
    <ChartFrame
      {...props}
      measured={state.measured}
      usualHeight={340}
      under={(box) => (
        <>
          {/* the grid lies under the points, so it cannot be part of the drawing above them */}
          <svg width={box.width} height={box.height} aria-hidden="true" className="absolute inset-0 block">
            <path d={gridPath(state)} {...GRID} />
          </svg>
          <ScatterCanvas points={points} view={view} slots={slots} picked={picked} />
        </>
      )}
      exportUnder={() => `<path d="${gridPath(state)}" stroke="${GRID.stroke}" stroke-width="${GRID.strokeWidth}" opacity="${GRID.opacity}"/>${scatterMarkup({ points, view, slots }, picked)}`}
      over={() => <Pointer props={props} state={state} handlers={gesture.handlers} />}
      foot={<Foot props={props} state={state} />}
    >
      {() => <ScatterDrawing state={state} xLabel={props.xLabel} yLabel={props.yLabel} rays={props.rays} outline={gesture.outline} />}
    </ChartFrame>
  );
}

const GRID = { stroke: 'var(--rule)', strokeWidth: 0.75, opacity: 0.75 };

function gridPath({ view, points, xKind, yKind, xTicks, yTicks }: ScatterState): string {
  const { left, top, width, height } = view.area;
  const upright = xTicks.map(({ value }) => `M${view.x(toShare(value, xKind, points.xDomain))} ${top}v${height}`);
  const level = yTicks.map(({ value }) => `M${left} ${view.y(toShare(value, yKind, points.yDomain))}h${width}`);
  return [...upright, ...level].join('');
}

function useGesture({ onSelect }: ScatterProps, state: ScatterState) {
  const { points, view, isShown, tool, hover } = state;
  const nearest = (at: readonly [number, number]) => nearestRow(points, view, at[0], at[1], REACH_PX, isShown);
  return useScatterGesture(
    {
      tool,
      onPolygon: (polygon, mode) =>
        onSelect?.(rowsInPolygon(points, view, polygon, isShown), { by: tool === 'box' ? 'box' : 'lasso', mode }),
      onClick: (at, mode) => {
        const row = nearest(at);
        if (row !== null) onSelect?.([row], { by: 'click', mode });
        else if (mode === 'replace') onSelect?.([], { by: 'clear', mode });
      },
      onMove: (at) => hover(at === null ? null : nearest(at)),
    },
    view.area,
  );
}

interface PartProps {
  props: ScatterProps;
  state: ScatterState;
}

/** Takes the pointer and the keys over the plot area, and shows the tooltip. */
function Pointer({ props, state, handlers }: PartProps & { handlers: ReturnType<typeof useGesture>['handlers'] }) {
  const { view, tool, zoom, hovered, measured } = state;
  const { left, top, width, height } = view.area;
  const { attach } = zoom;
  const onKey = (event: KeyboardEvent) => {
    if (event.key === 'Escape') props.onSelect?.([], { by: 'clear', mode: 'replace' });
    else zoom.onKey(event);
  };
  const at = hovered === null ? null : state.placeOf(hovered);
  return (
    <>
      <div
        ref={attach}
        role="application"
        tabIndex={0}
        aria-label={`${props.title}, plot area. Plus and minus zoom, arrows move, 0 fits, Escape clears the selection. To choose points by keys take the Rule tool.`}
        className="absolute"
        style={{ left, top, width, height, cursor: tool === 'pan' ? 'grab' : 'crosshair', touchAction: tool === 'rule' ? 'auto' : 'none' }}
        onKeyDown={onKey}
        {...handlers}
      />
      {hovered !== null && at !== null && props.tooltip !== undefined && (
        <ChartTooltip {...at} box={measured[1]}>
          {props.tooltip(hovered)}
        </ChartTooltip>
      )}
    </>
  );
}

/** Rule form and legend. */
function Foot({ props, state }: PartProps) {
  const { x, y, category, onSelect } = props;
  const { categories, tool, points, view, hidden, toggle } = state;
  const note = drawingNote(points.rows.length);
  return (
    <>
      {tool === 'rule' && (
        <ScatterRule
          xName={props.xName ?? shortName(props.xLabel)}
          yName={props.yName ?? shortName(props.yLabel)}
          categories={categories}
          onRule={(rule) => onSelect?.(rowsByRule(x, y, category, rule), { by: 'rule', mode: 'replace' })}
        />
      )}
      {(categories.length > 0 || note !== null) && (
        <LegendRow
          categories={categories}
          hidden={hidden}
          onToggle={toggle}
          onPick={(index) => {
            const rule = { x: [null, null], y: [null, null], category: index } as const;
            onSelect?.(rowsByRule(x, y, category, rule), { by: 'legend', mode: 'replace' });
          }}
          inset={view.area.left - 4}
          note={note}
        />
      )}
    </>
  );
}
