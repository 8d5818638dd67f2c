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
    <div className="flex flex-wrap items-center gap-x-2 text-caption text-ink-2" style={{ paddingLeft: inset }}>
      {order.map(({ label, slot, index }) => {
        const isHidden = hidden.has(index);
        return (
          <button
            key={index}
            type="button"
            aria-pressed={!isHidden}
            title={`${isHidden ? 'Show' : 'Hide'} ${label}${hint}`}
            className="inline-flex min-h-6 items-center gap-1 rounded-1 px-1 hover:bg-trough"
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
        <span className="ml-auto text-ink-3">{note}</span>
      )}
    </div>
  );
}
