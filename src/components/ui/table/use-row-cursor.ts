import { useState, type KeyboardEvent, type RefObject } from 'react';

const PAGE_ROWS = 12;

function moved(key: string, index: number, count: number): number | null {
  const last = count - 1;
  switch (key) {
    case 'ArrowDown':
      return Math.min(last, index + 1);
    case 'ArrowUp':
      return Math.max(0, index - 1);
    case 'PageDown':
      return Math.min(last, index + PAGE_ROWS);
    case 'PageUp':
      return Math.max(0, index - PAGE_ROWS);
    case 'Home':
      return 0;
    case 'End':
      return last;
    default:
      return null;
  }
}

/** One row at a time takes focus; arrows, Page, Home and End move it, also to rows not in the page yet. */
export function useRowCursor(
  count: number,
  scrollTo: (index: number) => void,
  scroller: RefObject<HTMLDivElement | null>,
) {
  const [wanted, setIndex] = useState(0);
  const index = Math.min(wanted, Math.max(0, count - 1));
  const onKeyDown = (event: KeyboardEvent) => {
    const next =
      event.target instanceof HTMLTableRowElement ? moved(event.key, index, count) : null;
    if (next === null) return;
    event.preventDefault();
    setIndex(next);
    const rowOf = () => scroller.current?.querySelector<HTMLElement>(`tr[data-row="${next}"]`);
    if (!rowOf()) scrollTo(next);
    requestAnimationFrame(() => requestAnimationFrame(() => rowOf()?.focus()));
  };
  return { index, setIndex, onKeyDown };
}
