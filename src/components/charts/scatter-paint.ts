import { rgb } from 'd3';
import { markPaint, markPath, slotColours } from './category-marks.tsx';
import type { Projector, ScatterPoints } from './scatter-points.ts';
import { resolveTokens, tokenValue } from './theme-colours.ts';

/** Up to here every point is drawn with its own mark. */
export const MOST_MARKS = 10_000;
const MARKS_OVER_DOTS = 4_000;
export const CONTOURS_FROM = 20_000;
export const MARK_RADIUS = 2.4;

/** How many points get a mark: all, or one in `every` over a ground of dots that shows them all. */
export function drawingOf(count: number): { dots: boolean; every: number } {
  return count <= MOST_MARKS ? { dots: false, every: 1 } : { dots: true, every: Math.ceil(count / MARKS_OVER_DOTS) };
}

/** The sentence a caption owes its reader where a picture is thinned; null where it is not. */
export function drawingNote(count: number): string | null {
  const { dots, every } = drawingOf(count);
  if (!dots) return null;
  return `every point a dot, 1 in ${every} a mark`;
}

/** Slot of a row, or 0 for a row with no category. */
export type SlotOf = (row: number) => number;

export interface Sprites {
  plain: Map<number, HTMLCanvasElement>;
  picked: Map<number, HTMLCanvasElement>;
  ratio: number;
  sizePx: number;
}

function sprite(slot: number, picked: boolean, ratio: number, sizePx: number): HTMLCanvasElement | null {
  const canvas = document.createElement('canvas');
  canvas.width = sizePx * ratio;
  canvas.height = sizePx * ratio;
  const pen = canvas.getContext('2d');
  if (pen === null) return null;
  pen.scale(ratio, ratio);
  const outline = new Path2D(markPath(slot === 0 ? 1 : slot, MARK_RADIUS, sizePx / 2, sizePx / 2));
  const paint = slot === 0 ? { fill: 'var(--sheet)', stroke: 'var(--ink-3)', strokeWidth: 0.8 } : markPaint(slot);
  pen.globalAlpha = picked ? 1 : 0.85;
  pen.fillStyle = resolveTokens(paint.fill);
  pen.fill(outline);
  pen.strokeStyle = picked ? tokenValue('--pick') : resolveTokens(paint.stroke);
  pen.lineWidth = picked ? 1.3 : Math.max(0.6, paint.strokeWidth - 0.2);
  pen.stroke(outline);
  return canvas;
}

/** Marks painted once per slot and theme, then stamped. */
export function makeSprites(slots: Iterable<number>, ratio: number): Sprites {
  const sizePx = Math.ceil(MARK_RADIUS * 2 * 1.35 + 3);
  const sprites: Sprites = { plain: new Map(), picked: new Map(), ratio, sizePx };
  for (const slot of [0, ...slots]) {
    const plain = sprite(slot, false, ratio, sizePx);
    const picked = sprite(slot, true, ratio, sizePx);
    if (plain !== null && picked !== null) {
      sprites.plain.set(slot, plain);
      sprites.picked.set(slot, picked);
    }
  }
  return sprites;
}

interface Stamp {
  points: ScatterPoints;
  view: Projector;
  slotOf: SlotOf;
  /** Draws this row? */
  takes: (row: number, index: number) => boolean;
}

/** Stamps marks in row order; the canvas covers exactly the plot area. */
export function stampMarks(pen: CanvasRenderingContext2D, stamp: Stamp, sprites: Sprites, picked: boolean): void {
  const { points, view, slotOf, takes } = stamp;
  const { left, top, width, height } = view.area;
  const { ratio, sizePx } = sprites;
  const from = picked ? sprites.picked : sprites.plain;
  for (let i = 0; i < points.rows.length; i++) {
    const row = points.rows[i] ?? 0;
    if (!takes(row, i)) continue;
    const x = view.x(points.u[i] ?? 0) - left;
    const y = view.y(points.v[i] ?? 0) - top;
    if (x < -4 || y < -4 || x > width + 4 || y > height + 4) continue;
    const image = from.get(slotOf(row));
    if (image !== undefined) pen.drawImage(image, Math.round((x - sizePx / 2) * ratio), Math.round((y - sizePx / 2) * ratio));
  }
}

type Rgb = readonly [number, number, number];

function parts(colour: string): Rgb {
  const { r, g, b } = rgb(resolveTokens(colour));
  return [r || 0, g || 0, b || 0];
}

/** Edge colours by slot: dots are too small for the paler fills to show. */
export function dotColours(slots: Iterable<number>): Map<number, Rgb> {
  const found = new Map<number, Rgb>([[0, parts('var(--ink-3)')]]);
  for (const slot of slots) found.set(slot, parts(slotColours(slot).edge));
  return found;
}

function blend(pixels: Uint8ClampedArray, at: number, [r, g, b]: Rgb, alpha: number): void {
  const under = (pixels[at + 3] ?? 0) / 255;
  const over = alpha + under * (1 - alpha);
  const keep = (under * (1 - alpha)) / over;
  const take = alpha / over;
  pixels[at] = (pixels[at] ?? 0) * keep + r * take;
  pixels[at + 1] = (pixels[at + 1] ?? 0) * keep + g * take;
  pixels[at + 2] = (pixels[at + 2] ?? 0) * keep + b * take;
  pixels[at + 3] = over * 255;
}

/** Paints every point as a small square straight into pixels: some 20 ms for 200,000 points. */
export function paintDots(pen: CanvasRenderingContext2D, stamp: Stamp, colourOf: (row: number) => Rgb, dot: { sizePx: number; alpha: number; ratio: number }): void {
  const { points, view, takes } = stamp;
  const { left, top } = view.area;
  const { width, height } = pen.canvas;
  const image = pen.getImageData(0, 0, width, height);
  const side = Math.max(1, Math.round(dot.sizePx * dot.ratio));
  for (let i = 0; i < points.rows.length; i++) {
    const row = points.rows[i] ?? 0;
    if (!takes(row, i)) continue;
    const x = Math.round((view.x(points.u[i] ?? 0) - left) * dot.ratio - side / 2);
    const y = Math.round((view.y(points.v[i] ?? 0) - top) * dot.ratio - side / 2);
    if (x < 0 || y < 0 || x + side > width || y + side > height) continue;
    const colour = colourOf(row);
    for (let dy = 0; dy < side; dy++) {
      for (let dx = 0; dx < side; dx++) blend(image.data, ((y + dy) * width + x + dx) * 4, colour, dot.alpha);
    }
  }
  pen.putImageData(image, 0, 0);
}

/** The marks as SVG markup, one path a category, for the export. */
export function marksMarkup(stamp: Stamp, picked: (row: number) => boolean): string {
  const { points, view, slotOf, takes } = stamp;
  const { left, top, width, height } = view.area;
  const paths = new Map<string, string[]>();
  for (let i = 0; i < points.rows.length; i++) {
    const row = points.rows[i] ?? 0;
    if (!takes(row, i)) continue;
    const x = view.x(points.u[i] ?? 0);
    const y = view.y(points.v[i] ?? 0);
    if (x < left || y < top || x > left + width || y > top + height) continue;
    const slot = slotOf(row);
    const key = `${picked(row) ? 1 : 0}/${slot}`;
    const list = paths.get(key) ?? [];
    if (list.length === 0) paths.set(key, list);
    list.push(markPath(slot === 0 ? 1 : slot, MARK_RADIUS, x, y));
  }
  return [...paths].sort(([a], [b]) => a.localeCompare(b)).map(([key, list]) => pathMarkup(key, list.join(''))).join('');
}

function pathMarkup(key: string, d: string): string {
  const [flag, slotText] = key.split('/');
  const slot = Number(slotText);
  const paint = slot === 0 ? { fill: 'var(--sheet)', stroke: 'var(--ink-3)', strokeWidth: 0.8 } : markPaint(slot);
  const stroke = flag === '1' ? 'var(--pick)' : paint.stroke;
  return `<path d="${d}" fill="${paint.fill}" stroke="${stroke}" stroke-width="${flag === '1' ? 1.3 : 0.6}" opacity="${flag === '1' ? 1 : 0.85}"/>`;
}
