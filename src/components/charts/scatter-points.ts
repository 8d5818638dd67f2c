import { polygonContains } from 'd3';
import KDBush from 'kdbush';
import type { PlotArea, ScaleKind } from './chart-types.ts';
import { niceDomain } from './ticks.ts';

type Domain = readonly [number, number];

/** A value as a share of a domain (0 at its low end), linear or log. */
export function toShare(value: number, kind: ScaleKind, [low, high]: Domain): number {
  return kind === 'log' ? Math.log(value / low) / Math.log(high / low) : (value - low) / (high - low);
}

/** The value at a share of a domain. */
export function fromShare(share: number, kind: ScaleKind, [low, high]: Domain): number {
  return kind === 'log' ? low * (high / low) ** share : low + share * (high - low);
}

/** Points of a scatter that have both values, as shares of their domains, with a search tree. */
export interface ScatterPoints {
  /** Row of each kept point, in row order. */
  rows: Int32Array;
  u: Float64Array;
  v: Float64Array;
  tree: KDBush | null;
  xDomain: Domain;
  yDomain: Domain;
  /** Rows without a value, or not above zero on a log axis. */
  leftOut: number;
}

export interface Axes {
  xKind: ScaleKind;
  yKind: ScaleKind;
  xDomain?: Domain | undefined;
  yDomain?: Domain | undefined;
}

export function scatterPoints(x: Float64Array, y: Float64Array, axes: Axes): ScatterPoints {
  const xDomain = axes.xDomain ?? niceDomain(x, axes.xKind);
  const yDomain = axes.yDomain ?? niceDomain(y, axes.yKind);
  const rows = new Int32Array(x.length);
  const u = new Float64Array(x.length);
  const v = new Float64Array(x.length);
  let count = 0;
  for (let row = 0; row < x.length; row++) {
    const share = toShare(x[row] ?? NaN, axes.xKind, xDomain);
    const rise = toShare(y[row] ?? NaN, axes.yKind, yDomain);
    if (!Number.isFinite(share) || !Number.isFinite(rise)) continue;
    rows[count] = row;
    u[count] = share;
    v[count] = rise;
    count++;
  }
  const tree = count === 0 ? null : new KDBush(count);
  for (let i = 0; i < count; i++) tree?.add(u[i] ?? 0, v[i] ?? 0);
  tree?.finish();
  const leftOut = x.length - count;
  return { rows: rows.subarray(0, count), u: u.subarray(0, count), v: v.subarray(0, count), tree, xDomain, yDomain, leftOut };
}

/** Where shares fall on the screen, and back, under a pan and zoom. */
export interface Projector {
  area: PlotArea;
  x: (u: number) => number;
  y: (v: number) => number;
  u: (px: number) => number;
  v: (py: number) => number;
}

export function projector(area: PlotArea, zoom: { k: number; x: number; y: number }): Projector {
  const { left, top, width, height } = area;
  return {
    area,
    x: (u) => left + zoom.x + zoom.k * u * width,
    y: (v) => top + zoom.y + zoom.k * (1 - v) * height,
    u: (px) => (px - left - zoom.x) / (zoom.k * width),
    v: (py) => 1 - (py - top - zoom.y) / (zoom.k * height),
  };
}

/** Which points count: those of a hidden category do not. */
export type IsShown = (row: number) => boolean;

/** The row nearest a place on the screen, within `reachPx`; null when there is none. */
export function nearestRow(points: ScatterPoints, view: Projector, px: number, py: number, reachPx: number, isShown: IsShown): number | null {
  if (points.tree === null) return null;
  const near = points.tree.range(view.u(px - reachPx), view.v(py + reachPx), view.u(px + reachPx), view.v(py - reachPx));
  let best = reachPx * reachPx;
  let found: number | null = null;
  for (const i of near) {
    const row = points.rows[i] ?? 0;
    const dx = view.x(points.u[i] ?? 0) - px;
    const dy = view.y(points.v[i] ?? 0) - py;
    if (dx * dx + dy * dy > best || !isShown(row)) continue;
    best = dx * dx + dy * dy;
    found = row;
  }
  return found;
}

/** Rows inside a polygon drawn on the screen, in row order. */
export function rowsInPolygon(points: ScatterPoints, view: Projector, polygon: [number, number][], isShown: IsShown): number[] {
  if (points.tree === null || polygon.length < 3) return [];
  const shape = polygon.map(([px, py]): [number, number] => [view.u(px), view.v(py)]);
  const us = shape.map(([u]) => u);
  const vs = shape.map(([, v]) => v);
  return points.tree
    .range(Math.min(...us), Math.min(...vs), Math.max(...us), Math.max(...vs))
    .filter((i) => polygonContains(shape, [points.u[i] ?? 0, points.v[i] ?? 0]))
    .map((i) => points.rows[i] ?? 0)
    .filter(isShown)
    .sort((a, b) => a - b);
}

/** The four corners of a box dragged between two points. */
export function boxPolygon([x0, y0]: readonly [number, number], [x1, y1]: readonly [number, number]): [number, number][] {
  return [[x0, y0], [x1, y0], [x1, y1], [x0, y1]];
}

/** Limits typed in place of a drag; an end left out is open. */
export interface SelectionRule {
  x: readonly [number | null, number | null];
  y: readonly [number | null, number | null];
  category: number | null;
}

/** Rows whose values lie within the typed limits, ends included. */
export function rowsByRule(x: Float64Array, y: Float64Array, category: ArrayLike<number> | undefined, rule: SelectionRule): number[] {
  const within = (value: number, [low, high]: SelectionRule['x']) =>
    Number.isFinite(value) && (low === null || value >= low) && (high === null || value <= high);
  const rows: number[] = [];
  for (let row = 0; row < x.length; row++) {
    const sameCategory = rule.category === null || category?.[row] === rule.category;
    if (sameCategory && within(x[row] ?? NaN, rule.x) && within(y[row] ?? NaN, rule.y)) rows.push(row);
  }
  return rows;
}
