/** Widths of Source Sans 3 in ems, rounded up, by kind of letter; digits are tabular. */
const NARROW = new Set([...'ijl.,:;\'|!I()[]·']);
const SLIM = new Set([...'frt-"/ ']);
const WIDE = new Set([...'mwMW@%—']);

function emWidth(letter: string): number {
  if (letter === '\u2009') return 0.14;
  if (NARROW.has(letter)) return 0.29;
  if (SLIM.has(letter)) return 0.35;
  if (WIDE.has(letter)) return 0.86;
  if (letter >= '0' && letter <= '9') return 0.5;
  if (letter >= 'A' && letter <= 'Z') return 0.63;
  return 0.53;
}

/**
 * Width of a label in pixels, estimated on the wide side: it needs no layout, so it is the same in
 * a browser, a test and an export. Bold adds 6 %, monospace is 0.6 em a letter.
 */
export function textWidth(text: string, sizePx: number, kind: 'plain' | 'bold' | 'mono' = 'plain'): number {
  const letters = [...text];
  if (kind === 'mono') return letters.length * 0.6 * sizePx;
  const ems = letters.reduce((sum, letter) => sum + emWidth(letter), 0);
  return ems * sizePx * (kind === 'bold' ? 1.06 : 1);
}

/** Cuts a label to the given width with an ellipsis; an empty string where not even that fits. */
export function fitText(text: string, maxPx: number, sizePx: number, kind: 'plain' | 'bold' | 'mono' = 'plain'): string {
  if (textWidth(text, sizePx, kind) <= maxPx) return text;
  const letters = [...text];
  for (let count = letters.length - 1; count > 0; count--) {
    const cut = `${letters.slice(0, count).join('').trimEnd()}…`;
    if (textWidth(cut, sizePx, kind) <= maxPx) return cut;
  }
  return '';
}

/** Breaks a label at spaces into at most `maxLines` lines; the last is cut where it must be. */
export function wrapText(text: string, maxPx: number, sizePx: number, maxLines = 2): string[] {
  const lines: string[] = [];
  let line = '';
  for (const word of text.split(' ')) {
    const longer = line === '' ? word : `${line} ${word}`;
    if (line === '' || lines.length === maxLines - 1 || textWidth(longer, sizePx) <= maxPx) line = longer;
    else {
      lines.push(line);
      line = word;
    }
  }
  lines.push(line);
  return lines.map((part) => fitText(part, maxPx, sizePx)).filter((part) => part !== '');
}
