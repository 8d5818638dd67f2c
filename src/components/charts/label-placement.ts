/** A rectangle in pixels: left, top, width, height. */
export interface Rect {
  x: number;
  y: number;
  width: number;
  height: number;
}

export interface LabelRequest {
  id: string;
  /** The point the label speaks of. */
  x: number;
  y: number;
  width: number;
  height: number;
  /** The greater keeps its place; the least important gives way. */
  weight: number;
  /** Preferred side, radians clockwise from east; default is above. */
  towards?: number;
  /** Gap between the point and the label. */
  gap?: number;
  /** How far from the preferred side it may turn, in eighths; 4 is all round. */
  turns?: number;
}

export interface PlacedLabel {
  id: string;
  /** Middle of the label. */
  x: number;
  y: number;
}

export function overlaps(a: Rect, b: Rect): boolean {
  return a.x < b.x + b.width && b.x < a.x + a.width && a.y < b.y + b.height && b.y < a.y + a.height;
}

function inside(rect: Rect, room: Rect): boolean {
  return (
    rect.x >= room.x &&
    rect.y >= room.y &&
    rect.x + rect.width <= room.x + room.width &&
    rect.y + rect.height <= room.y + room.height
  );
}

function around(label: LabelRequest, angle: number): Rect {
  const gap = label.gap ?? 4;
  const x = label.x + Math.cos(angle) * (label.width / 2 + gap);
  const y = label.y + Math.sin(angle) * (label.height / 2 + gap);
  return { x: x - label.width / 2, y: y - label.height / 2, width: label.width, height: label.height };
}

const EIGHTHS = [0, 1, -1, 2, -2, 3, -3, 4];

/**
 * Lays labels beside their points so that none overlaps another, an obstacle or the edge. The
 * heaviest is laid first, on its preferred side, then 45 degrees at a time to either hand. A label
 * that finds no room is left out.
 */
export function placeLabels(
  requests: readonly LabelRequest[],
  room: Rect,
  obstacles: readonly Rect[] = [],
): PlacedLabel[] {
  const taken: Rect[] = [...obstacles];
  const placed: PlacedLabel[] = [];
  for (const label of [...requests].sort((a, b) => b.weight - a.weight)) {
    const start = label.towards ?? -Math.PI / 2;
    const allowed = EIGHTHS.filter((turn) => Math.abs(turn) <= (label.turns ?? 4));
    const free = allowed.map((turn) => around(label, start + (turn * Math.PI) / 4)).find(
      (rect) => inside(rect, room) && !taken.some((other) => overlaps(rect, other)),
    );
    if (free === undefined) continue;
    taken.push(free);
    placed.push({ id: label.id, x: free.x + free.width / 2, y: free.y + free.height / 2 });
  }
  return placed;
}

/**
 * Moves the middles of labels along one axis so that they stay in order, `gap` apart and within
 * [low, high]; where they cannot all fit they run over the low end.
 *
 * @returns New middles, in the order given.
 */
export function spreadAlong(middles: readonly number[], sizes: readonly number[], gap: number, low: number, high: number): number[] {
  const order = middles.map((_value, index) => index).sort((a, b) => (middles[a] ?? 0) - (middles[b] ?? 0));
  const out = [...middles];
  const half = (index: number) => (sizes[index] ?? 0) / 2;
  let floor = low;
  for (const index of order) {
    const middle = Math.max(middles[index] ?? low, floor + half(index));
    out[index] = middle;
    floor = middle + half(index) + gap;
  }
  let ceiling = high;
  for (const index of order.reverse()) {
    const middle = Math.min(out[index] ?? high, ceiling - half(index));
    out[index] = middle;
    ceiling = middle - half(index) - gap;
  }
  return out;
}
