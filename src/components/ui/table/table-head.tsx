import { ArrowDown, ArrowUp } from 'lucide-react';
import { cx } from '#src/lib/cx.ts';
import { Icon } from '../icon.tsx';
import type { Column } from './column.ts';
import type { TableModel } from './use-table-model.ts';

export const ALIGN = { left: 'text-left', right: 'text-right', center: 'text-center' } as const;

interface Props<Row> {
  columns: readonly Column<Row>[];
  model: TableModel<Row>;
  isDense?: boolean;
}

export function TableHead<Row>({ columns, model, isDense }: Props<Row>) {
  return (
    <thead>
      <tr>
        {columns.map((column) => {
          const sort = model.sortOf(column);
          const isSortable = column.isSortable !== false && !column.isControl;
          return (
            <th
              key={`${column.header} ${column.unit ?? ''}`}
              scope="col"
              aria-sort={isSortable ? sort : undefined}
              className={cx(
                'sticky top-0 z-1 border-b border-rule-firm bg-sheet text-caption font-semibold text-ink-2',
                isDense ? 'px-1 py-0.5' : 'px-2 py-1',
                'align-bottom',
                ALIGN[column.align ?? 'left'],
              )}
              style={column.widthRem ? { width: `${column.widthRem}rem` } : undefined}
            >
              {isSortable ? (
                <SortButton column={column} sort={sort} onPress={() => model.toggleSort(column)} />
              ) : (
                <HeaderText column={column} />
              )}
            </th>
          );
        })}
      </tr>
    </thead>
  );
}

function HeaderText<Row>({ column }: { column: Column<Row> }) {
  return (
    <>
      {column.header}
      {column.unit && <span className="font-normal text-ink-3">, {column.unit}</span>}
    </>
  );
}

function SortButton<Row>({
  column,
  sort,
  onPress,
}: {
  column: Column<Row>;
  sort: 'ascending' | 'descending' | 'none';
  onPress: () => void;
}) {
  return (
    <button
      type="button"
      onClick={onPress}
      title={sort === 'none' ? 'Sort' : `Sorted, ${sort}`}
      className={cx(
        'group inline-flex min-h-6 max-w-full items-end gap-0.5 rounded-1 border-0 bg-transparent p-0 text-inherit hover:text-ink',
        column.align === 'right' && 'flex-row-reverse text-right',
        column.align === 'center' && 'justify-center',
      )}
    >
      <span>
        <HeaderText column={column} />
      </span>
      {sort !== 'none' && (
        <Icon
          icon={sort === 'ascending' ? ArrowUp : ArrowDown}
          size={12}
          className="mb-0.5 text-copper"
        />
      )}
    </button>
  );
}
