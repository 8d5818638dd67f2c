import { QUALIFIER } from '#contract/tables.ts';

export interface UnitBlock {
  /** Code of the hole or batch. */
  group: number;
  /** Its measured rows, in order. */
  rows: number[];
  times: 1_000 | 10_000;
  isLower: boolean;
}

/** Fewer measured rows than this tell nothing of a unit. */
const LEAST_ROWS = 10;
/** How far a ratio may lie from a thousand or ten thousand: a factor of three. */
const NEAR = Math.log10(3);
/** Shares of the other rows a block has to lie wholly below or above. */
const [LOW, HIGH] = [0.05, 0.95];

/**
 * Finds holes or batches of one analyte whose measured values, all of them, lie apart from the other
 * rows' by about a thousand (ppm against ppb or kg/t) or ten thousand times (% against ppm).
 * A block holds less than half of the measured rows.
 *
 * @param values ppm by row. @param qualifiers By row. @param groups Code of the hole or batch by row, NaN for none.
 */
export function unitBlocks(values: Float64Array, qualifiers: Uint8Array, groups: Float64Array): UnitBlock[] {
  const sums = new Map<number, { sum: number; rows: number[] }>();
  let [measured, total] = [0, 0];
  for (let row = 0; row < values.length; row++) {
    const group = groups[row] ?? Number.NaN;
    if (qualifiers[row] !== QUALIFIER.measured || Number.isNaN(group)) continue;
    measured += 1;
    total += values[row] ?? 0;
    let entry = sums.get(group);
    if (!entry) sums.set(group, (entry = { sum: 0, rows: [] }));
    entry.sum += values[row] ?? 0;
    entry.rows.push(row);
  }
  const blocks: UnitBlock[] = [];
  for (const [group, { sum, rows }] of sums) {
    const others = measured - rows.length;
    if (rows.length < LEAST_ROWS || rows.length >= others || others < LEAST_ROWS) continue;
    // Means are cheap and tell most holes apart from a wrong unit; the few that look so are judged in full.
    if (Math.abs(Math.log10((sum / rows.length) * (others / (total - sum)))) < 1) continue;
    const block = judge(group, rows, values, qualifiers, groups);
    if (block) blocks.push(block);
  }
  return blocks;
}

function judge(group: number, rows: number[], values: Float64Array, qualifiers: Uint8Array, groups: Float64Array): UnitBlock | null {
  const own = Float64Array.from(rows, (row) => values[row] ?? Number.NaN).sort();
  const rest = values.filter((_, row) => qualifiers[row] === QUALIFIER.measured && groups[row] !== group).sort();
  const at = (sorted: Float64Array, share: number): number => sorted[Math.round(share * (sorted.length - 1))] ?? Number.NaN;
  const isLower = at(own, 1) < at(rest, LOW);
  if (!isLower && !(at(own, 0) > at(rest, HIGH))) return null;
  const apart = Math.abs(Math.log10(at(own, 0.5) / at(rest, 0.5)));
  const power = ([3, 4] as const).find((each) => Math.abs(apart - each) <= NEAR);
  return power === undefined ? null : { group, rows, times: power === 3 ? 1_000 : 10_000, isLower };
}
