import type { ReactNode } from 'react';

/** What a cell of a file or a table of assays holds beside a plain value. */
export type CellLook = 'plain' | 'below' | 'above' | 'missing' | 'refused' | 'warned';

/** Looks of the cell itself: shape first, then colour. */
export const CELL_LOOKS: Record<CellLook, string> = {
  plain: '',
  below: 'bg-note-wash italic text-note',
  above: 'bg-warn-wash text-warn shadow-[inset_0_-2px_0_var(--warn)]',
  missing: 'hatch text-ink-3 [--hatch:var(--rule)]',
  refused: 'bg-bad-wash font-bold text-bad shadow-[inset_0_0_0_1.5px_var(--bad)]',
  warned: 'text-warn underline decoration-dotted underline-offset-4',
};

export const LOOK_WORDS: Record<Exclude<CellLook, 'plain'>, string> = {
  below: 'below limit',
  above: 'over range',
  missing: 'not sampled',
  refused: 'row set aside',
  warned: 'warning',
};

/** Says a mark to people who do not see it. */
export function LookWord({ look }: { look: CellLook }) {
  return look === 'plain' ? null : <span className="sr-only">, {LOOK_WORDS[look]}</span>;
}

/** The key of cell marks under a table. */
export function CellLegend({
  looks,
  examples,
}: {
  looks: readonly Exclude<CellLook, 'plain'>[];
  examples: Record<Exclude<CellLook, 'plain'>, ReactNode>;
}) {
  return (
    <ul
      aria-label="Marks"
      className="m-0 flex list-none flex-wrap gap-x-3.5 gap-y-1 p-0 text-caption text-ink-2"
    >
      {looks.map((look) => (
        <li key={look} className="flex items-center gap-1.5">
          <span className={`min-w-5 px-1 text-center font-mono text-tick ${CELL_LOOKS[look]}`}>
            {examples[look]}
          </span>
          {LOOK_WORDS[look]}
        </li>
      ))}
    </ul>
  );
}
