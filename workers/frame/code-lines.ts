import { csvField, formatDepth } from '#kernels/recipe/code-lines.ts';

/** One interval (or surface sample) with its code, ready to be written. */
export interface CodeRow {
  hole: string;
  /** NaN for surface samples. */
  fromM: number;
  toM: number;
  lengthM: number;
  code: string;
  /** Group number; NaN where the row has none. */
  group: number;
  membership: number;
  /** Elements whose deleterious zones hold the row, in the order of the limits. */
  deleterious: readonly string[];
}

/** A text that a spreadsheet might take for a formula is disarmed with a leading quote mark. */
const cell = (text: string): string => csvField(/^'*[=+\-@\t\r\0]/.test(text) ? `'${text}` : text);

const depth = (value: number): string => (Number.isNaN(value) ? '' : formatDepth(value));

/**
 * Lines of the codes file, LF after each. Depths have three decimals and membership four, so that
 * the bytes do not depend on how a number is printed.
 */
export function codeLines(rows: readonly CodeRow[], snapshotId: string): string {
  const lines = rows.map(({ hole, fromM, toM, lengthM, code, group, membership, deleterious }) =>
    [
      cell(hole), depth(fromM), depth(toM), Number.isNaN(fromM) ? '' : depth(lengthM), code, Number.isNaN(group) ? '' : String(group),
      Number.isNaN(membership) ? '' : membership.toFixed(4), deleterious.join(' '), snapshotId,
    ].join(','),
  );
  return lines.length === 0 ? '' : `${lines.join('\n')}\n`;
}
