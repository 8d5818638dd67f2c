/** A cell of a file: numbers are written with a point whatever the screen shows; null is empty. */
export type Cell = string | number | boolean | null | undefined;

/** Text that a spreadsheet would run as a formula gets a leading apostrophe; numbers are never altered. */
function inert(cell: Cell): string {
  if (cell === null || cell === undefined) return '';
  if (typeof cell === 'number') return Number.isFinite(cell) ? String(cell) : '';
  const text = String(cell);
  return /^[=+\-@\t\r\0]/.test(text) ? `'${text}` : text;
}

/** Comma-separated, RFC 4180. */
export function toCsv(header: readonly string[], rows: Iterable<readonly Cell[]>): string {
  const quoted = (cell: Cell): string => {
    const text = inert(cell);
    return /[",\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
  };
  return lines(header, rows, (row) => row.map(quoted).join(','), '\r\n');
}

/** Tab-separated, for the clipboard: pastes into a spreadsheet. Tabs and line ends inside a cell become spaces. */
export function toTsv(header: readonly string[], rows: Iterable<readonly Cell[]>): string {
  const flat = (cell: Cell): string => inert(cell).replace(/[\t\r\n]+/g, ' ');
  return lines(header, rows, (row) => row.map(flat).join('\t'), '\n');
}

function lines(
  header: readonly string[],
  rows: Iterable<readonly Cell[]>,
  write: (row: readonly Cell[]) => string,
  end: string,
): string {
  const out = [write(header)];
  for (const row of rows) out.push(write(row));
  return out.join(end) + end;
}
