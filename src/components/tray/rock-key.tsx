import { Popover } from 'radix-ui';
import { Button } from '#src/components/ui/button.tsx';
import { LABEL_PX } from '../charts/chart-styles.ts';
import { RockSwatch } from '../charts/rock-patterns.tsx';
import type { RockKeyEntry } from '../charts/rock-patterns.tsx';
import { textWidth } from '../charts/text-width.ts';
import { useBox } from '../charts/use-box.ts';

const SAMPLE_PX = 16 + 4 + 10;
const MORE_PX = 62;

/** How many entries fit in a row of the given width, room for "and more" kept where not all do. */
export function keyRoom(labels: readonly string[], widthPx: number): number {
  let used = 0;
  for (const [index, label] of labels.entries()) {
    used += SAMPLE_PX + textWidth(label, LABEL_PX);
    const isLast = index === labels.length - 1;
    if (used + (isLast ? 0 : MORE_PX) > widthPx) return index;
  }
  return labels.length;
}

function Entry({ entry }: { entry: RockKeyEntry }) {
  return (
    <span className="inline-flex items-center gap-1 whitespace-nowrap">
      <RockSwatch pattern={entry.pattern} />
      {entry.label}
    </span>
  );
}

/** Patterns and names of the rocks in the tray; those that do not fit open in a list. */
export function RockKey({ entries }: { entries: readonly RockKeyEntry[] }) {
  const [measure, box] = useBox({ width: 480, height: 24 });
  const count = keyRoom(entries.map(({ label }) => label), box.width);
  const rest = entries.length - count;
  return (
    <div ref={measure} className="flex h-6 min-w-16 flex-1 items-center justify-end gap-2.5 overflow-hidden text-caption text-ink-2">
      {entries.slice(0, count).map((entry) => (
        <Entry key={entry.code} entry={entry} />
      ))}
      {rest > 0 && (
        <Popover.Root>
          <Popover.Trigger asChild>
            <Button size="tiny" kind="bare" className="!h-6">
              {count === 0 ? 'Rocks' : `${rest} more`}
            </Button>
          </Popover.Trigger>
          <Popover.Portal>
            <Popover.Content side="top" align="end" sideOffset={4} collisionPadding={8} className="opens z-40 grid max-h-80 gap-1 overflow-auto rounded-3 border border-rule bg-sheet px-3 py-2 text-small text-ink-2 shadow-float">
              {entries.map((entry) => (
                <Entry key={entry.code} entry={entry} />
              ))}
            </Popover.Content>
          </Popover.Portal>
        </Popover.Root>
      )}
    </div>
  );
}
