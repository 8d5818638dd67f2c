import { useCallback, useMemo, useState } from 'react';
import { plotArea } from './axes.tsx';
import { isPicked } from './chart-types.ts';
import type { Category, ChartBasics, PickedRows, RowTooltip, ScaleKind, SelectMode } from './chart-types.ts';
import { densityContours } from './scatter-density.ts';
import { CONTOURS_FROM, HIDDEN } from './scatter-paint.ts';
import { fromShare, projector, scatterPoints, toShare } from './scatter-points.ts';
import type { ScatterPoints } from './scatter-points.ts';
import type { Ray } from './scatter-rays.tsx';
import type { ScatterTool } from './scatter-tools.tsx';
import { axisTicks } from './ticks.ts';
import { useBox } from './use-box.ts';
import { useZoom } from './use-zoom.ts';

/** How rows were chosen, for the selection card ("drawn by lasso"). */
export interface ScatterChoice {
  by: 'lasso' | 'box' | 'click' | 'rule' | 'legend' | 'clear';
  mode: SelectMode;
}

export interface ScatterProps extends ChartBasics {
  /** One value a row; NaN leaves the row out. */
  x: Float64Array;
  y: Float64Array;
  /** Index into `categories` a row; NaN or another number draws the row plain. */
  category?: ArrayLike<number>;
  categories?: readonly Category[];
  selected?: PickedRows;
  hovered?: number | null;
  onSelect?: (rows: number[], how: ScatterChoice) => void;
  onHover?: (row: number | null) => void;
  tooltip?: RowTooltip;
  tool?: ScatterTool;
  rays?: readonly Ray[];
  /** Quantity, unit, scale: "Cu, % (log scale)". */
  xLabel: string;
  yLabel: string;
  /** Short names for the rule form; the label up to its first comma when absent. */
  xName?: string;
  yName?: string;
  xKind?: ScaleKind;
  yKind?: ScaleKind;
  xDomain?: readonly [number, number];
  yDomain?: readonly [number, number];
  /** Categories not drawn, by index; kept inside when absent. */
  hidden?: ReadonlySet<number>;
  onHidden?: (hidden: ReadonlySet<number>) => void;
}

const NO_CATEGORIES: readonly Category[] = [];
const NONE_HIDDEN: ReadonlySet<number> = new Set();

function usePoints({ x, y, xKind = 'linear', yKind = 'linear', xDomain, yDomain }: ScatterProps) {
  const [xLow, xHigh] = xDomain ?? [];
  const [yLow, yHigh] = yDomain ?? [];
  return useMemo(() => {
    const pair = (low?: number, high?: number) => (low === undefined || high === undefined ? undefined : ([low, high] as const));
    return scatterPoints(x, y, { xKind, yKind, xDomain: pair(xLow, xHigh), yDomain: pair(yLow, yHigh) });
  }, [x, y, xKind, yKind, xLow, xHigh, yLow, yHigh]);
}

function useHidden(props: ScatterProps) {
  const [own, setOwn] = useState(NONE_HIDDEN);
  const hidden = props.hidden ?? own;
  const toggle = (index: number) => {
    const next = new Set(hidden);
    if (!next.delete(index)) next.add(index);
    setOwn(next);
    props.onHidden?.(next);
  };
  return { hidden, toggle };
}

function useHovered(props: ScatterProps) {
  const [own, setOwn] = useState<number | null>(null);
  const hovered = props.hovered === undefined ? own : props.hovered;
  const hover = (row: number | null) => {
    if (row === hovered) return;
    setOwn(row);
    props.onHover?.(row);
  };
  return { hovered, hover };
}

/** Slot of each kept point: 0 without a category, 255 where its category is hidden. */
function slotsOfPoints(points: ScatterPoints, category: ArrayLike<number> | undefined, categories: readonly Category[], hidden: ReadonlySet<number>): Uint8Array {
  const slots = new Uint8Array(points.rows.length);
  for (let i = 0; i < slots.length; i++) {
    const index = category?.[points.rows[i] ?? -1] ?? -1;
    slots[i] = hidden.has(index) ? HIDDEN : (categories[index]?.slot ?? 0);
  }
  return slots;
}

/** Kept points that are chosen, by index. */
function pickedPoints(points: ScatterPoints, selected: PickedRows | undefined): Int32Array {
  if (selected === undefined) return new Int32Array(0);
  return Int32Array.from(points.rows.keys()).filter((i) => isPicked(selected, points.rows[i] ?? -1));
}

/** The points of a scatter and the view on them: what is shown, where it falls, what is under the pointer. */
export function useScatter(props: ScatterProps) {
  const { category, categories = NO_CATEGORIES, tool = 'lasso', xKind = 'linear', yKind = 'linear' } = props;
  const measured = useBox({ width: 480, height: typeof props.height === 'number' ? props.height : 340 });
  const box = measured[1];
  const points = usePoints(props);
  const { hidden, toggle } = useHidden(props);
  const { hovered, hover } = useHovered(props);
  const restTicks = axisTicks(yKind, points.yDomain, { lengthPx: box.height - 50, vertical: true });
  const area = plotArea({ ...box, yTicks: restTicks, xLabel: props.xLabel, yLabel: props.yLabel });
  const zoom = useZoom({ width: area.width, height: area.height, panning: tool === 'pan' });
  const { left, top, width, height } = area;
  const { k, x: shiftX, y: shiftY } = zoom.transform;
  const view = useMemo(
    () => projector({ left, top, width, height }, { k, x: shiftX, y: shiftY }),
    [left, top, width, height, k, shiftX, shiftY],
  );
  const isShown = useCallback((row: number) => !hidden.has(category?.[row] ?? -1), [category, hidden]);
  const xSpan = [view.u(left), view.u(left + width)].map((u) => fromShare(u, xKind, points.xDomain));
  const ySpan = [view.v(top + height), view.v(top)].map((v) => fromShare(v, yKind, points.yDomain));
  const xTicks = axisTicks(xKind, [xSpan[0] ?? 0, xSpan[1] ?? 1], { lengthPx: width });
  const yTicks = axisTicks(yKind, [ySpan[0] ?? 0, ySpan[1] ?? 1], { lengthPx: height, vertical: true });
  const slots = useMemo(() => slotsOfPoints(points, category, categories, hidden), [points, category, categories, hidden]);
  const { selected } = props;
  const picked = useMemo(() => pickedPoints(points, selected), [points, selected]);
  const contours = useMemo(() => (points.rows.length > CONTOURS_FROM ? densityContours(points, isShown) : []), [points, isShown]);
  const placeOf = (row: number) => {
    const x = view.x(toShare(props.x[row] ?? NaN, xKind, points.xDomain));
    const y = view.y(toShare(props.y[row] ?? NaN, yKind, points.yDomain));
    const inPlot = x >= left && x <= left + width && y >= top && y <= top + height;
    return inPlot && isShown(row) ? { x, y } : null;
  };
  return { measured, points, view, zoom, hidden, toggle, hovered, hover, isShown, slots, picked, xTicks, yTicks, contours, placeOf, categories, tool, xKind, yKind };
}

export type ScatterState = ReturnType<typeof useScatter>;
