import type { KeyboardEvent } from 'react';
import { cx } from '#src/lib/cx.ts';
import type { Column } from './column.ts';
import { ALIGN } from './table-head.tsx';

interface Props<Row> {
  columns: readonly Column<Row>[];
  row: Row;
  index: number;
  isVirtual: boolean;
  isDense: boolean | undefined;
  isLast: boolean;
  isPicked: boolean;
  extraClass: string;
  onPick: ((row: Row) => void) | undefined;
  onHover: ((row: Row | null) => void) | undefined;
  tabIndex: number | undefined;
  onFocus: () => void;
}

export function TableBodyRow<Row>(props: Props<Row>) {
  const {
    columns,
    row,
    index,
    isVirtual,
    isDense,
    isLast,
    isPicked,
    extraClass,
    onPick,
    onHover,
    tabIndex,
    onFocus,
  } = props;
  const onKeyDown = (event: KeyboardEvent<HTMLTableRowElement>) => {
    if (event.target !== event.currentTarget || (event.key !== 'Enter' && event.key !== ' '))
      return;
    event.preventDefault();
    onPick?.(row);
  };
  return (
    <tr
      data-row={index}
      aria-rowindex={isVirtual ? index + 2 : undefined}
      aria-selected={onPick ? isPicked : undefined}
      tabIndex={tabIndex}
      onFocus={onPick ? onFocus : undefined}
      onClick={onPick ? () => onPick(row) : undefined}
      onKeyDown={onPick ? onKeyDown : undefined}
      onMouseEnter={onHover ? () => onHover(row) : undefined}
      className={cx(
        'focus-visible:-outline-offset-2',
        isVirtual && 'h-7',
        onPick && 'cursor-pointer',
        isPicked
          ? 'bg-pick-wash [&>:first-child]:shadow-[inset_3px_0_0_var(--copper)]'
          : 'hover:bg-trough/45',
        extraClass,
      )}
    >
      {columns.map((column) => {
        const look = cx(
          isDense ? 'px-1 py-px' : 'px-2 py-1',
          !isLast && 'border-b border-rule',
          'align-middle text-ink',
          ALIGN[column.align ?? 'left'],
          column.isMono && 'font-mono text-[0.75rem]',
          (column.isWhole || column.isMono || column.align === 'right') && 'whitespace-nowrap',
          isVirtual && 'truncate',
        );
        const key = `${column.header} ${column.unit ?? ''}`;
        const shown = column.cell(row);
        const content =
          shown === null || shown === undefined || shown === '' ? (
            <span className="text-ink-3">–</span>
          ) : (
            shown
          );
        return column.rowHeader ? (
          <th key={key} scope="row" className={cx(look, 'font-semibold')}>
            {content}
          </th>
        ) : (
          <td key={key} className={look}>
            {content}
          </td>
        );
      })}
    </tr>
  );
}
