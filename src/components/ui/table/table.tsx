import { useVirtualizer } from '@tanstack/react-virtual';
import { useRef, type KeyboardEvent, type ReactNode } from 'react';
import { cx } from '#src/lib/cx.ts';
import type { Column } from './column.ts';
import { TableBodyRow } from './table-body-row.tsx';
import { TableHead } from './table-head.tsx';
import { useOverflows } from './use-overflows.ts';
import { useRowCursor } from './use-row-cursor.ts';
import { useTableModel, type SortBy } from './use-table-model.ts';

export interface TableProps<Row extends object> {
  /** What the table holds; read out, and shown with `isCaptionShown`. */
  caption: string;
  isCaptionShown?: boolean;
  /** Memoise or declare outside: a new list re-sorts. */
  columns: readonly Column<Row>[];
  rows: readonly Row[];
  rowKey?: (row: Row, index: number) => string | number;
  /** A row can be taken: by press, Enter or Space. */
  onPick?: (row: Row) => void;
  isPicked?: (row: Row) => boolean;
  onHover?: (row: Row | null) => void;
  /** Further look of a row: set aside, stale. */
  rowClass?: (row: Row) => string | false | undefined;
  firstSort?: SortBy;
  /**
   * Height in rem above which the table scrolls in itself; long tables need one (28 when left out).
   * `place`: as high as the place its class name gives it.
   */
  maxHeightRem?: number | 'place';
  isDense?: boolean;
  /** Shown when there are no rows. */
  empty?: ReactNode;
  className?: string;
}

const ROW_PX = 28;
/** From here on only the rows in view are in the page. */
const VIRTUAL_FROM = 150;

/** Rows under a sticky header: sort by header, move by arrow keys, 100,000 rows as smooth as ten. */
export function Table<Row extends object>(props: TableProps<Row>) {
  const { caption, isCaptionShown, columns, rows, rowKey, firstSort, isDense, empty, className } =
    props;
  const { onPick, isPicked, onHover, rowClass } = props;
  const scroller = useRef<HTMLDivElement>(null);
  const isScrolling = useOverflows(scroller, rows.length > 0 || empty === undefined);
  const model = useTableModel(columns, rows, rowKey, firstSort);
  const isVirtual = model.rows.length >= VIRTUAL_FROM;
  const maxHeightRem = props.maxHeightRem ?? (isVirtual ? 28 : undefined);
  const virtualizer = useVirtualizer({
    count: model.rows.length,
    enabled: isVirtual,
    getScrollElement: () => scroller.current,
    estimateSize: () => ROW_PX,
    overscan: 12,
    initialRect: { width: 800, height: 450 },
  });
  const cursor = useRowCursor(
    model.rows.length,
    (index) => virtualizer.scrollToIndex(index),
    scroller,
  );
  const items = virtualizer.getVirtualItems();
  const shown = isVirtual
    ? items.map(({ index }) => index)
    : Array.from({ length: model.rows.length }, (_, index) => index);
  const before = isVirtual ? (items[0]?.start ?? 0) : 0;
  const after = isVirtual ? virtualizer.getTotalSize() - (items.at(-1)?.end ?? 0) : 0;
  if (rows.length === 0 && empty !== undefined) return <>{empty}</>;
  const onKeyDown = (event: KeyboardEvent) => (onPick ? cursor.onKeyDown(event) : undefined);
  return (
    <div
      ref={scroller}
      {...(isScrolling ? { tabIndex: 0, role: 'group', 'aria-label': `${caption}, scrolls` } : {})}
      className={cx('scroll-edge relative min-w-0 overflow-auto', className)}
      style={typeof maxHeightRem === 'number' ? { maxHeight: `${maxHeightRem}rem` } : undefined}
    >
      <table
        aria-rowcount={isVirtual ? model.rows.length + 1 : undefined}
        className={cx(
          'w-full border-separate border-spacing-0 text-small',
          isVirtual && 'table-fixed',
        )}
      >
        <caption className={isCaptionShown ? 'pb-1 text-left text-caption text-ink-3' : 'sr-only'}>
          {caption}
        </caption>
        <TableHead columns={columns} model={model} isDense={isDense} />
        <tbody onKeyDown={onKeyDown} onMouseLeave={onHover ? () => onHover(null) : undefined}>
          <Spacer heightPx={before} span={columns.length} />
          {shown.map((index) => {
            const item = model.rows[index];
            if (!item) return null;
            return (
              <TableBodyRow
                key={item.key}
                columns={columns}
                row={item.row}
                index={index}
                isVirtual={isVirtual}
                isDense={isDense}
                isLast={index === model.rows.length - 1}
                isPicked={isPicked?.(item.row) ?? false}
                extraClass={rowClass?.(item.row) || ''}
                onPick={onPick}
                onHover={onHover}
                tabIndex={onPick ? (cursor.index === index ? 0 : -1) : undefined}
                onFocus={() => cursor.setIndex(index)}
              />
            );
          })}
          <Spacer heightPx={after} span={columns.length} />
        </tbody>
      </table>
    </div>
  );
}

function Spacer({ heightPx, span }: { heightPx: number; span: number }) {
  if (heightPx <= 0) return null;
  return (
    <tr aria-hidden>
      <td colSpan={span} className="p-0" style={{ height: heightPx }} />
    </tr>
  );
}
