import { LABEL_PX } from './chart-styles.ts';
import { overlaps } from './label-placement.ts';
import type { PlacedLabel, Rect } from './label-placement.ts';
import { textWidth } from './text-width.ts';

interface DrawnLine {
  label: string;
  points: readonly { px: number; py: number }[];
}

const HEIGHT = 14;

/** Height of a broken line at a place along x; null beyond its ends. */
function lineAt(points: DrawnLine['points'], px: number): number | null {
  for (let i = 1; i < points.length; i++) {
    const [a, b] = [points[i - 1], points[i]];
    if (a === undefined || b === undefined || px < a.px || px > b.px) continue;
    return a.py + ((px - a.px) / (b.px - a.px || 1)) * (b.py - a.py);
  }
  return null;
}

/** Least distance between a label and any line that passes its width. */
function clearance(rect: Rect, lines: readonly DrawnLine[]): number {
  let least = Infinity;
  for (const { points } of lines) {
    for (let i = 0; i <= 6; i++) {
      const at = lineAt(points, rect.x + (rect.width * i) / 6);
      if (at === null) continue;
      const gap = at < rect.y ? rect.y - at : at > rect.y + rect.height ? at - rect.y - rect.height : 0;
      least = Math.min(least, gap);
    }
  }
  return least;
}

/**
 * A name for each line, close to its own and clear of all: every point above and below is tried, and
 * the one that keeps 2 px from all lines and lies nearest its own wins. Where none is clear the one
 * with most room does.
 */
export function lineLabels(lines: readonly DrawnLine[], room: Rect): PlacedLabel[] {
  const taken: Rect[] = [];
  return lines.flatMap((line): PlacedLabel[] => {
    const width = textWidth(line.label, LABEL_PX) + 2;
    let best: { rect: Rect; score: number } | null = null;
    for (const { px, py } of line.points) {
      for (const side of [-1, 1]) {
        const x = Math.min(Math.max(px - width / 2, room.x), room.x + room.width - width);
        for (const apart of [11, 16, 22]) {
          const rect = { x, y: py + side * apart - HEIGHT / 2, width, height: HEIGHT };
          if (rect.y < room.y || rect.y + HEIGHT > room.y + room.height || taken.some((other) => overlaps(rect, other))) continue;
          const clear = Math.min(8, clearance(rect, lines));
          const score = (clear < 2 ? clear * 20 - 100 : 0) - apart + clear;
          if (best === null || score > best.score) best = { rect, score };
        }
      }
    }
    if (best === null) return [];
    taken.push(best.rect);
    return [{ id: line.label, x: best.rect.x + width / 2, y: best.rect.y + HEIGHT / 2 }];
  });
}
