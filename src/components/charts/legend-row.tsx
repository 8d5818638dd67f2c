import type { MouseEvent } from 'react';
import { CategoryMark } from './category-marks.tsx';
import type { Category } from './chart-types.ts';

interface Props {
  categories: readonly Category[];
  /** Indexes of categories not drawn. */
  hidden: ReadonlySet<number>;
  onToggle: (index: number) => void;
  /** Shift + click; when absent the chips only show and hide. */
  onPick?: (index: number, event: MouseEvent) => void;
  /** Left inset, so that the row lines up with the axis. */
  inset?: number;
  note?: string | null;
}

/** Categories in slot order as chips: a click hides or shows one, Shift + click takes its points. */
export function LegendRow({ categories, hidden, onToggle, onPick, inset = 0, note }: Props) {
  const order = categories.map((category, index) => ({ ...category, index })).sort((a, b) => a.slot - b.slot);
  const hint = onPick === undefined ? '' : '; Shift + click takes its points';
  return (
    <div className="flex flex-wrap items-center gap-x-2 gap-y-0" style={{ paddingLeft: inset, font: 'var(--t-cap)', color: 'var(--ink-2)' }}>
      {order.map(({ label, slot, index }) => {
        const isHidden = hidden.has(index);
        return (
          <button
            key={index}
            type="button"
            aria-pressed={!isHidden}
            title={`${isHidden ? 'Show' : 'Hide'} ${label}${hint}`}
            className="inline-flex min-h-6 cursor-pointer items-center gap-1 rounded-sm px-1 hover:bg-(--trough)"
            style={isHidden ? { color: 'var(--ink-3)', textDecoration: 'line-through' } : {}}
            onClick={(event) => (event.shiftKey && onPick !== undefined ? onPick(index, event) : onToggle(index))}
          >
            <span style={{ opacity: isHidden ? 0.4 : 1, display: 'inline-flex' }}>
              <CategoryMark slot={slot} size={12} />
            </span>
            {label}
          </button>
        );
      })}
      {note !== undefined && note !== null && (
        <span className="ml-auto" style={{ color: 'var(--ink-3)' }}>
          {note}
        </span>
      )}
    </div>
  );
}
