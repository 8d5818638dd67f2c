import { rgb } from 'd3';
import { markPaint, markPath, slotColours } from './category-marks.tsx';
import type { Projector, ScatterPoints } from './scatter-points.ts';
import { resolveTokens, tokenValue } from './theme-colours.ts';

/** Up to here every point is drawn with its own mark. */
export const MOST_MARKS = 10_000;
const MARKS_OVER_DOTS = 4_000;
export const CONTOURS_FROM = 20_000;
const MARK_RADIUS = 2.4;
/** Slot of a point that is not drawn. */
export const HIDDEN = 255;
const SPRITE_PX = Math.ceil(MARK_RADIUS * 2 * 1.35 + 3);

/** How many points get a mark: all, or one in `every` over a ground of dots that shows them all. */
export function drawingOf(count: number): { dots: boolean; every: number } {
  return count <= MOST_MARKS ? { dots: false, every: 1 } : { dots: true, every: Math.ceil(count / MARKS_OVER_DOTS) };
}

/** The words a caption owes its reader where a picture is thinned; null where it is not. */
export function drawingNote(count: number): string | null {
  const { dots, every } = drawingOf(count);
  return dots ? `every point a dot, 1 in ${every} a mark` : null;
}

/** Points to paint: their places, and the slot of each (0 without a category, 255 hidden). */
export interface Painting {
  points: ScatterPoints;
  view: Projector;
  slots: Uint8Array;
  /** Only these points, by index; all when absent. */
  only?: Int32Array;
  /** One point in so many; 1 when absent. */
  every?: number;
}

/** Walks the drawn points in row order with their place in the plot area. */
function eachPoint({ points, view, slots, only, every = 1 }: Painting, marginPx: number, draw: (x: number, y: number, slot: number) => void): void {
  const { u, v } = points;
  const { left, top, width, height } = view.area;
  const count = only === undefined ? u.length : only.length;
  const [x0, y0] = [view.x(0) - left, view.y(0) - top];
  const [perU, perV] = [view.x(1) - left - x0, view.y(1) - top - y0];
  for (let at = 0; at < count; at += every) {
    const i = only === undefined ? at : (only[at] ?? 0);
    const slot = slots[i] ?? 0;
    if (slot === HIDDEN) continue;
    const x = x0 + perU * (u[i] ?? 0);
    const y = y0 + perV * (v[i] ?? 0);
    if (x >= -marginPx && y >= -marginPx && x <= width + marginPx && y <= height + marginPx) draw(x, y, slot);
  }
}

interface MarkLook {
  fill: string;
  stroke: string;
  strokeWidth: number;
  opacity: number;
}

function lookOf(slot: number, isPicked: boolean): MarkLook {
  const paint = slot === 0 ? { fill: 'var(--sheet)', stroke: 'var(--ink-3)', strokeWidth: 0.8 } : markPaint(slot);
  if (isPicked) return { fill: paint.fill, stroke: 'var(--pick)', strokeWidth: 1.2, opacity: 1 };
  return { ...paint, strokeWidth: Math.max(0.6, paint.strokeWidth - 0.2), opacity: 0.85 };
}

function sprite(slot: number, isPicked: boolean, ratio: number): HTMLCanvasElement | null {
  const canvas = document.createElement('canvas');
  canvas.width = SPRITE_PX * ratio;
  canvas.height = SPRITE_PX * ratio;
  const pen = canvas.getContext('2d');
  if (pen === null) return null;
  const { fill, stroke, strokeWidth, opacity } = lookOf(slot, isPicked);
  const outline = new Path2D(markPath(slot === 0 ? 1 : slot, MARK_RADIUS, SPRITE_PX / 2, SPRITE_PX / 2));
  pen.scale(ratio, ratio);
  pen.globalAlpha = opacity;
  pen.fillStyle = resolveTokens(fill);
  pen.fill(outline);
  pen.strokeStyle = resolveTokens(stroke);
  pen.lineWidth = strokeWidth;
  pen.stroke(outline);
  return canvas;
}

/** Stamps a mark for each point; each slot's mark is painted once and copied. */
export function stampMarks(pen: CanvasRenderingContext2D, painting: Painting, isPicked: boolean, ratio: number): void {
  const sprites = new Map<number, HTMLCanvasElement | null>();
  eachPoint(painting, 4, (x, y, slot) => {
    if (!sprites.has(slot)) sprites.set(slot, sprite(slot, isPicked, ratio));
    const image = sprites.get(slot);
    if (image) pen.drawImage(image, Math.round((x - SPRITE_PX / 2) * ratio), Math.round((y - SPRITE_PX / 2) * ratio));
  });
}

/** A colour as one 32-bit number in the byte order of canvas pixels (little-endian, opaque). */
function packed(colour: string): number {
  const { r, g, b } = rgb(resolveTokens(colour));
  return ((255 << 24) | ((b || 0) << 16) | ((g || 0) << 8) | (r || 0)) >>> 0;
}

/** Edge colours by slot: dots are too small for the paler fills to show. */
function dotColours(): Uint32Array {
  const colours = new Uint32Array(256).fill(packed('var(--ink-3)'));
  for (let slot = 1; slot <= 16; slot++) colours[slot] = packed(slotColours(slot).edge);
  return colours;
}

export interface DotStyle {
  sizePx: number;
  ratio: number;
  /** A rim of this token about each dot. */
  rim?: string;
}

/** The walk of `eachPoint` written out: a call for each of 200,000 points would cost more than its pixels. */
function paintSquares(pixels: Uint32Array, width: number, height: number, painting: Painting, sidePx: number, ratio: number, colours: Uint32Array): void {
  const { points, view, slots, only } = painting;
  const { u, v } = points;
  const side = Math.max(1, Math.round(sidePx * ratio));
  const [x0, y0] = [(view.x(0) - view.area.left) * ratio - side / 2 + 0.5, (view.y(0) - view.area.top) * ratio - side / 2 + 0.5];
  const [perU, perV] = [(view.x(1) - view.x(0)) * ratio, (view.y(1) - view.y(0)) * ratio];
  const count = only === undefined ? u.length : only.length;
  for (let at = 0; at < count; at++) {
    const i = only === undefined ? at : only[at]!;
    const slot = slots[i]!;
    const x = Math.floor(x0 + perU * u[i]!);
    const y = Math.floor(y0 + perV * v[i]!);
    if (slot === HIDDEN || x < 0 || y < 0 || x + side > width || y + side > height) continue;
    const colour = colours[slot]!;
    const end = (y + side) * width + x;
    for (let line = y * width + x; line < end; line += width) {
      for (let dx = 0; dx < side; dx++) pixels[line + dx] = colour;
    }
  }
}

/** Paints every point as a small square straight into pixels, so that 200,000 can be panned. */
export function paintDots(pen: CanvasRenderingContext2D, painting: Painting, { sizePx, ratio, rim }: DotStyle): void {
  const { width, height } = pen.canvas;
  const image = pen.createImageData(width, height);
  const pixels = new Uint32Array(image.data.buffer);
  if (rim !== undefined) paintSquares(pixels, width, height, painting, sizePx + 1.5, ratio, new Uint32Array(256).fill(packed(rim)));
  paintSquares(pixels, width, height, painting, sizePx, ratio, dotColours());
  pen.putImageData(image, 0, 0);
}

/** The dots as an embedded picture, for the export. */
function dotsMarkup(painting: Painting): string {
  const { left, top, width, height } = painting.view.area;
  const canvas = document.createElement('canvas');
  canvas.width = Math.round(width * 2);
  canvas.height = Math.round(height * 2);
  const pen = canvas.getContext('2d');
  if (pen === null) return '';
  paintDots(pen, painting, { sizePx: 1.3, ratio: 2 });
  return `<image x="${left}" y="${top}" width="${width}" height="${height}" href="${canvas.toDataURL('image/png')}"/>`;
}

function usesMarkup(painting: Painting, isPicked: boolean): string {
  const { left, top } = painting.view.area;
  const prefix = isPicked ? 'picked' : 'mark';
  const uses: string[] = [];
  const slots = new Set<number>();
  eachPoint(painting, 0, (x, y, slot) => {
    slots.add(slot);
    uses.push(`<use href="#${prefix}-${slot}" x="${(x + left).toFixed(1)}" y="${(y + top).toFixed(1)}"/>`);
  });
  const defs = [...slots].map((slot) => {
    const { fill, stroke, strokeWidth, opacity } = lookOf(slot, isPicked);
    return `<path id="${prefix}-${slot}" d="${markPath(slot === 0 ? 1 : slot, MARK_RADIUS)}" fill="${fill}" stroke="${stroke}" stroke-width="${strokeWidth}" opacity="${opacity}"/>`;
  });
  return `<defs>${defs.join('')}</defs>${uses.join('')}`;
}

/** What the canvases show as SVG markup: a mark each, over a picture of the dots where there are many. */
export function scatterMarkup(painting: Painting, picked: Int32Array): string {
  const { dots, every } = drawingOf(painting.points.rows.length);
  const ground = dots ? dotsMarkup(painting) : '';
  const chosen = drawingOf(picked.length).every;
  return ground + usesMarkup({ ...painting, every }, false) + usesMarkup({ ...painting, only: picked, every: chosen }, true);
}

/** Paints the chosen points: marks with an ink edge, or rimmed dots where there are many. */
export function paintPicked(pen: CanvasRenderingContext2D, painting: Painting, picked: Int32Array, ratio: number): void {
  const chosen = { ...painting, only: picked };
  if (drawingOf(picked.length).dots) paintDots(pen, chosen, { sizePx: 1.5, ratio, rim: tokenValue('--pick') });
  else stampMarks(pen, chosen, true, ratio);
}
