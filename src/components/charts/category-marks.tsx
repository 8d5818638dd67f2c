export const SLOT_COUNT = 16;
const FILLED_SLOTS = 8;

/** Unit outlines, about equal in area; slot 1 is a circle and has none. */
const OUTLINES: readonly (readonly (readonly [number, number])[])[] = [
  [],
  [[-0.86, -0.86], [0.86, -0.86], [0.86, 0.86], [-0.86, 0.86]],
  [[0, -1.18], [1.1, 0.78], [-1.1, 0.78]],
  [[0, -1.2], [1.2, 0], [0, 1.2], [-1.2, 0]],
  [[0, 1.18], [-1.1, -0.78], [1.1, -0.78]],
  [[-0.4, -1.15], [0.4, -1.15], [0.4, -0.4], [1.15, -0.4], [1.15, 0.4], [0.4, 0.4], [0.4, 1.15], [-0.4, 1.15], [-0.4, 0.4], [-1.15, 0.4], [-1.15, -0.4], [-0.4, -0.4]],
  polar(5, [1.12]),
  polar(10, [1.3, 0.6]),
];

function polar(count: number, radii: readonly number[]): (readonly [number, number])[] {
  return Array.from({ length: count }, (_value, i) => {
    const angle = (2 * Math.PI * i) / count - Math.PI / 2;
    const radius = radii[i % radii.length] ?? 1;
    return [radius * Math.cos(angle), radius * Math.sin(angle)] as const;
  });
}

function checkSlot(slot: number): number {
  if (!Number.isInteger(slot) || slot < 1 || slot > SLOT_COUNT) {
    throw new RangeError(`expected a category slot from 1 to ${SLOT_COUNT}, found ${slot}`);
  }
  return slot;
}

/** Colours of a slot as style values; slots 9 to 16 repeat 1 to 8, hollow. */
export interface SlotColours {
  fill: string;
  edge: string;
  /** Text laid on the fill. */
  onFill: string;
  hollow: boolean;
}

export function slotColours(slot: number): SlotColours {
  const base = ((checkSlot(slot) - 1) % FILLED_SLOTS) + 1;
  const onFill = base === 2 || base === 7 ? `var(--on-c${base})` : 'var(--on-c)';
  return { fill: `var(--c${base})`, edge: `var(--c${base}e)`, onFill, hollow: slot > FILLED_SLOTS };
}

const twoDecimals = (value: number) => Math.round(value * 100) / 100;

/** Outline of a slot's mark about (x, y), as SVG path data; also read by Path2D. */
export function markPath(slot: number, radius: number, x = 0, y = 0): string {
  const outline = OUTLINES[(checkSlot(slot) - 1) % FILLED_SLOTS] ?? [];
  const r = twoDecimals(radius);
  if (outline.length === 0) return `M${twoDecimals(x - radius)} ${twoDecimals(y)}a${r} ${r} 0 1 0 ${2 * r} 0a${r} ${r} 0 1 0 ${-2 * r} 0z`;
  const points = outline.map(([ux, uy]) => `${twoDecimals(x + ux * radius)} ${twoDecimals(y + uy * radius)}`);
  return `M${points.join('L')}z`;
}

/** Fill and stroke of a mark: hollow slots take the ground inside and a firmer line. */
export function markPaint(slot: number): { fill: string; stroke: string; strokeWidth: number } {
  const { fill, edge, hollow } = slotColours(slot);
  return hollow ? { fill: 'var(--sheet)', stroke: edge, strokeWidth: 1.4 } : { fill, stroke: edge, strokeWidth: 0.8 };
}

/** The mark of a category, to stand beside its name. */
export function CategoryMark({ slot, size = 12 }: { slot: number; size?: number }) {
  const half = size / 2;
  return (
    <svg width={size} height={size} viewBox={`${-half} ${-half} ${size} ${size}`} aria-hidden="true" className="inline-block flex-none">
      <path d={markPath(slot, half * 0.74)} {...markPaint(slot)} />
    </svg>
  );
}

/** Hatched fills of the hollow slots; give each drawing its own prefix. */
export function HollowSlotDefs({ prefix }: { prefix: string }) {
  return (
    <defs>
      {Array.from({ length: SLOT_COUNT - FILLED_SLOTS }, (_value, i) => {
        const slot = FILLED_SLOTS + 1 + i;
        const { fill, edge } = slotColours(slot);
        return (
          <pattern key={slot} id={`${prefix}-slot-${slot}`} width={6} height={6} patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
            <rect width={6} height={6} fill="var(--sheet)" />
            <rect width={3} height={6} fill={fill} />
            <rect width={0.8} height={6} fill={edge} />
          </pattern>
        );
      })}
    </defs>
  );
}

/** Fill of a run of core in a slot, solid or hatched. */
export function runFill(slot: number, prefix: string): string {
  const { fill, hollow } = slotColours(slot);
  return hollow ? `url(#${prefix}-slot-${slot})` : fill;
}
