import { tokenValue } from './theme-colours.ts';

export const PATTERN_TILE_PX = 12;

interface PatternDrawing {
  d: string;
  width?: number;
  round?: boolean;
}

/** One neutral mark each on a tile of 12 px. The words name the mark, not a rock. */
const DRAWINGS = {
  vees: { d: 'M2 3l2 3 2-3M8 8l2 3 2-3' },
  plus: { d: 'M3 1v5M.5 3.5h5M9 7v5M6.5 9.5h5' },
  dots: { d: 'M2 2h0M8 2h0M5 6h0M11 6h0M2 10h0M8 10h0', width: 1.7, round: true },
  slant: { d: 'M-1 13 13-1M-1 7 7-1M5 13l8-8' },
  level: { d: 'M0 1.5h12M0 4.5h12M0 7.5h12M0 10.5h12', width: 1.3 },
  dashes: { d: 'M0 3h7M5 9h7' },
  humps: { d: 'M1 9c2-4 3.5-4 5.5 0M7.5 4.5c1-3 2.5-3 3.5 0' },
  backslant: { d: 'M-1-1 13 13M5-1l8 8M-1 5l8 8' },
  crossed: { d: 'M0 0l12 12M12 0 0 12' },
  uprights: { d: 'M1.5 0v12M5.5 0v12M9.5 0v12' },
  rings: { d: 'M5 3.5a2 2 0 1 1-4 0a2 2 0 1 1 4 0zM11 9.5a2 2 0 1 1-4 0a2 2 0 1 1 4 0z' },
  zigzag: { d: 'M0 4l3-3 3 3 3-3 3 3M0 10l3-3 3 3 3-3 3 3' },
  bricks: { d: 'M0 .5h12M0 6.5h12M3 .5v6M9 6.5v6' },
  pairs: { d: 'M1 2h4M1 4.5h4M7 8h4M7 10.5h4' },
  wedges: { d: 'M2 5.5l2-4 2 4zM8 11.5l2-4 2 4z' },
  waves: { d: 'M0 3c2-2.5 4-2.5 6 0s4 2.5 6 0M0 9c2-2.5 4-2.5 6 0s4 2.5 6 0' },
  posts: { d: 'M3 1v4M9 7v4', width: 1.5 },
  squares: { d: 'M1.5 1.5h3.5v3.5h-3.5zM7.5 7.5h3.5v3.5h-3.5z' },
} satisfies Record<string, PatternDrawing>;

export type RockPattern = keyof typeof DRAWINGS;

/** A logged code with its pattern and its name; no pattern: the code is written instead. */
export interface RockKeyEntry {
  code: string;
  pattern: RockPattern | null;
  label: string;
}

const isPattern = (name: string): name is RockPattern => Object.hasOwn(DRAWINGS, name);
export const ROCK_PATTERNS: readonly RockPattern[] = Object.keys(DRAWINGS).filter(isPattern);

/** Usual starts of logging codes and the pattern they get first (common practice; every log has its own codes). */
const USUAL: readonly (readonly [RegExp, RockPattern])[] = [
  [/^(AND|BAS)/i, 'vees'],
  [/^(DOL|GAB|DK|DYK)/i, 'plus'],
  [/^(RHY|RHD|DAC)/i, 'dots'],
  [/^(CHL|CS)/i, 'slant'],
  [/^(MSX|MSU|MS$)/i, 'level'],
  [/^(MUD|SHL|SLT|ARG)/i, 'dashes'],
  [/^(SOIL|COV|OVB|ALV|TRN)/i, 'humps'],
];

/** Patterns for all codes of a deposit, in one order everywhere, no two alike; codes beyond the last pattern get none. */
export function assignPatterns(codes: readonly string[]): Map<string, RockPattern | null> {
  const free = new Set(ROCK_PATTERNS);
  const found = new Map<string, RockPattern | null>();
  for (const code of codes) {
    const usual = USUAL.find(([start]) => start.test(code))?.[1];
    if (usual !== undefined && free.delete(usual)) found.set(code, usual);
  }
  for (const code of codes) {
    if (found.has(code)) continue;
    const [next = null] = free;
    if (next !== null) free.delete(next);
    found.set(code, next);
  }
  return found;
}

/** Pattern fills for one drawing; give each drawing its own prefix. */
export function RockPatternDefs({ prefix, patterns = ROCK_PATTERNS }: { prefix: string; patterns?: readonly RockPattern[] }) {
  return (
    <defs>
      {patterns.map((name) => {
        const { d, width, round }: PatternDrawing = DRAWINGS[name];
        return (
          <pattern key={name} id={`${prefix}-rock-${name}`} width={PATTERN_TILE_PX} height={PATTERN_TILE_PX} patternUnits="userSpaceOnUse">
            <rect width={PATTERN_TILE_PX} height={PATTERN_TILE_PX} fill="var(--rock-ground)" />
            <path d={d} fill="none" stroke="var(--rock-mark)" strokeWidth={width ?? 1} strokeLinecap={round === true ? 'round' : 'butt'} />
          </pattern>
        );
      })}
    </defs>
  );
}

/** Fill of a rock run; plain ground for a code without a pattern. */
export function rockFill(pattern: RockPattern | null, prefix: string): string {
  return pattern === null ? 'var(--rock-ground)' : `url(#${prefix}-rock-${pattern})`;
}

/** The same pattern for a canvas, in the colours of the theme now; null without a canvas. */
export function canvasRockPattern(context: CanvasRenderingContext2D, pattern: RockPattern): CanvasPattern | null {
  const tile = document.createElement('canvas');
  tile.width = PATTERN_TILE_PX;
  tile.height = PATTERN_TILE_PX;
  const pen = tile.getContext('2d');
  if (pen === null) return null;
  const { d, width, round }: PatternDrawing = DRAWINGS[pattern];
  pen.fillStyle = tokenValue('--rock-ground');
  pen.fillRect(0, 0, PATTERN_TILE_PX, PATTERN_TILE_PX);
  pen.strokeStyle = tokenValue('--rock-mark');
  pen.lineWidth = width ?? 1;
  pen.lineCap = round === true ? 'round' : 'butt';
  pen.stroke(new Path2D(d));
  return context.createPattern(tile, 'repeat');
}

/** A small sample of a pattern, to stand beside the name of its rock. */
export function RockSwatch({ pattern, width = 16, height = 10 }: { pattern: RockPattern | null; width?: number; height?: number }) {
  const prefix = `swatch-${pattern ?? 'none'}`;
  return (
    <svg width={width} height={height} aria-hidden="true" className="inline-block flex-none">
      {pattern !== null && <RockPatternDefs prefix={prefix} patterns={[pattern]} />}
      <rect x={0.3} y={0.3} width={width - 0.6} height={height - 0.6} fill={rockFill(pattern, prefix)} stroke="var(--rock-mark)" strokeWidth={0.6} />
    </svg>
  );
}
