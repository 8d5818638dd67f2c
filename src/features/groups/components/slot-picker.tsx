import { useState } from 'react';
import type { Group } from '#contract/groupings.ts';
import { CategoryMark, SLOT_COUNT } from '#src/components/charts/category-marks.tsx';
import { Panel } from '#src/components/ui/panel.tsx';
import { cx } from '#src/lib/cx.ts';

interface Props {
  group: Group;
  /** Slots of other groups, by name. */
  taken: ReadonlyMap<number, string>;
  refusal: string | undefined;
  onSlot: (slot: number) => void;
}

const SHAPES = ['circle', 'square', 'triangle up', 'diamond', 'triangle down', 'cross', 'pentagon', 'star'];

/** "4, diamond", "12, hollow diamond" */
export const slotWords = (slot: number): string => `${slot}, ${slot > SHAPES.length ? 'hollow ' : ''}${SHAPES[(slot - 1) % SHAPES.length] ?? ''}`;

/** The colour and mark of a group; opens all sixteen. */
export function SlotPicker({ group, taken, refusal, onSlot }: Props) {
  const [isOpen, setOpen] = useState(false);
  if (refusal !== undefined) return <CategoryMark slot={group.slot} size={14} />;
  return (
    <Panel
      label={`Colour of ${group.name}`}
      align="start"
      className="w-auto"
      isOpen={isOpen}
      onOpenChange={setOpen}
      trigger={
        <button type="button" aria-label={`Colour and mark of ${group.name}: ${slotWords(group.slot)}. Change`} className="inline-grid size-6 place-items-center rounded-1 hover:bg-trough">
          <CategoryMark slot={group.slot} size={14} />
        </button>
      }
    >
      <div role="group" aria-label="Colours and marks" className="grid grid-cols-8 gap-1">
        {Array.from({ length: SLOT_COUNT }, (_value, index) => index + 1).map((slot) => {
          const owner = taken.get(slot);
          const isOwn = slot === group.slot;
          return (
            <button
              key={slot}
              type="button"
              aria-pressed={isOwn}
              aria-label={`${slotWords(slot)}${owner === undefined ? '' : `, of ${owner}`}`}
              title={owner === undefined ? slotWords(slot) : `Of ${owner} already`}
              disabled={owner !== undefined}
              className={cx('grid size-7 place-items-center rounded-1 border disabled:cursor-not-allowed disabled:opacity-40', isOwn ? 'border-copper' : 'border-transparent hover:bg-trough')}
              onClick={() => {
                setOpen(false);
                if (!isOwn) onSlot(slot);
              }}
            >
              <CategoryMark slot={slot} size={16} />
            </button>
          );
        })}
      </div>
      <p className="mt-2 max-w-60 text-caption text-ink-3">A group keeps its colour in every plot and in the tray. Colours of other groups are not offered.</p>
    </Panel>
  );
}
