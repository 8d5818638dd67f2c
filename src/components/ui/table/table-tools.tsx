import { Copy, Download } from 'lucide-react';
import { copyText, saveFile } from '#src/lib/download.ts';
import { toCsv, toTsv } from '#src/lib/delimited.ts';
import { notify } from '#src/lib/toasts.ts';
import { countOf } from '#src/lib/format.ts';
import type { MenuItem } from '../menu.tsx';
import { tableCells, type Column } from './column.ts';

/** Ways to take a table away, for a plate's download menu: CSV file, and TSV on the clipboard. */
export function tableExports<Row>(
  fileName: string,
  columns: readonly Column<Row>[],
  rows: readonly Row[],
): MenuItem[] {
  return [
    {
      label: 'CSV',
      hint: countOf(rows.length, 'row'),
      icon: Download,
      run: () => {
        const { header, cells } = tableCells(columns, rows);
        saveFile(`${fileName}.csv`, toCsv(header, cells), 'text/csv;charset=utf-8');
      },
    },
    {
      label: 'Copy for a spreadsheet',
      hint: 'tab-separated',
      icon: Copy,
      run: () => {
        const { header, cells } = tableCells(columns, rows);
        void copyText(toTsv(header, cells)).then((isCopied) =>
          notify(
            isCopied
              ? `${countOf(rows.length, 'row')} copied`
              : 'The browser did not let the page write to the clipboard. Take the CSV.',
          ),
        );
      },
    },
  ];
}
