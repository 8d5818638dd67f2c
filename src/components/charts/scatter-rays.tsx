import { halo, LABEL_PX, strongLabel } from './chart-styles.ts';
import { placeLabels } from './label-placement.ts';
import type { Rect } from './label-placement.ts';
import { textWidth } from './text-width.ts';

/** An element's loading on the two axes; drawn from the origin. */
export interface Ray {
  label: string;
  x: number;
  y: number;
}

interface Reach {
  xDomain: readonly [number, number];
  yDomain: readonly [number, number];
}

/** One factor for all rays, so that the longest stays within 88 % of the plot on its own side. */
export function rayFactor(rays: readonly Ray[], { xDomain, yDomain }: Reach): number {
  const limit = (value: number, [low, high]: readonly [number, number]) => {
    const side = value > 0 ? high : low;
    return value === 0 || side / value <= 0 ? Infinity : side / value;
  };
  const factor = Math.min(...rays.map((ray) => Math.min(limit(ray.x, xDomain), limit(ray.y, yDomain))));
  return Number.isFinite(factor) ? 0.88 * factor : 1;
}

interface Props {
  rays: readonly Ray[];
  at: { x: (value: number) => number; y: (value: number) => number };
  factor: number;
  room: Rect;
}

/** Biplot rays with labels that keep clear of each other; the shortest ray loses its label first. */
export function Rays({ rays, at, factor, room }: Props) {
  const origin = { x: at.x(0), y: at.y(0) };
  const ends = rays.map((ray) => ({ ...ray, px: at.x(ray.x * factor), py: at.y(ray.y * factor) }));
  const placed = placeLabels(
    ends.map((end) => ({
      id: end.label,
      x: end.px,
      y: end.py,
      width: textWidth(end.label, LABEL_PX, 'bold') + 2,
      height: 14,
      weight: Math.hypot(end.px - origin.x, end.py - origin.y),
      towards: Math.atan2(end.py - origin.y, end.px - origin.x),
      gap: 5,
    })),
    room,
    ends.map((end) => ({ x: end.px - 2, y: end.py - 2, width: 4, height: 4 })),
  );
  return (
    <g>
      {ends.map((end) => (
        <g key={end.label}>
          <line x1={origin.x} y1={origin.y} x2={end.px} y2={end.py} stroke="var(--ink)" strokeWidth={1.1} />
          <circle cx={end.px} cy={end.py} r={1.8} fill="var(--ink)" />
        </g>
      ))}
      {placed.map((label) => (
        <text key={label.id} x={label.x} y={label.y} dy="0.35em" textAnchor="middle" style={{ ...strongLabel, ...halo }}>
          {label.id}
        </text>
      ))}
    </g>
  );
}
