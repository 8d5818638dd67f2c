import { Copy, Download } from 'lucide-react';
import type { RefObject } from 'react';
import { toCsv, type Cell } from '#src/lib/delimited.ts';
import { saveFile } from '#src/lib/download.ts';
import { notify, notifyProblem } from '#src/lib/toasts.ts';
import type { MenuItem } from './menu.tsx';

/** A picture that can write itself: the handle of every chart. */
interface Drawn {
  toSvg: (caption?: string) => Promise<string>;
  toPng: (caption?: string, scale?: number) => Promise<Blob>;
}

interface Options {
  fileName: string;
  /** n, support, method, snapshot, as text; it is printed into the file. */
  caption: string;
  /** The numbers behind the picture, asked for when the file is. */
  table?: () => { columns: readonly string[]; rows: Iterable<readonly Cell[]> };
}

/** Ways to take a picture away, for a plate's download menu: SVG, PNG at twice its size, copy, CSV. */
export function figureExports(
  drawn: () => Drawn | null,
  { fileName, caption, table }: Options,
): MenuItem[] {
  const withDrawn = (work: (figure: Drawn) => Promise<void>) => () => {
    const figure = drawn();
    if (figure) void work(figure).catch(notifyProblem);
  };
  const items: MenuItem[] = [
    {
      label: 'SVG',
      hint: 'lines and type, for a report',
      icon: Download,
      run: withDrawn(async (figure) =>
        saveFile(`${fileName}.svg`, await figure.toSvg(caption), 'image/svg+xml;charset=utf-8'),
      ),
    },
    {
      label: 'PNG',
      hint: 'twice the size on screen',
      icon: Download,
      run: withDrawn(async (figure) => saveFile(`${fileName}.png`, await figure.toPng(caption, 2))),
    },
    { label: 'Copy the picture', icon: Copy, run: withDrawn(copyPicture(caption)) },
  ];
  if (table) {
    items.push({
      label: 'CSV',
      hint: 'the numbers drawn',
      icon: Download,
      run: () => {
        const { columns, rows } = table();
        saveFile(`${fileName}.csv`, toCsv(columns, rows), 'text/csv;charset=utf-8');
      },
    });
  }
  return items;
}

/** The same for a chart's own ref; the ref is read when an item is taken, never while rendering. */
export const useFigureExports = (chart: RefObject<Drawn | null>, options: Options): MenuItem[] =>
  figureExports(() => chart.current, options);

const copyPicture =
  (caption: string) =>
  async (figure: Drawn): Promise<void> => {
    const png = await figure.toPng(caption, 2);
    if (typeof ClipboardItem === 'undefined') {
      notify('The browser did not let the page write to the clipboard. Take the PNG.');
      return;
    }
    await navigator.clipboard.write([new ClipboardItem({ 'image/png': png })]);
    notify('Picture copied');
  };
