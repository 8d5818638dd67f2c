import { shortcutSheetOpen, useCommandList } from '#src/lib/commands.ts';
import { keysInWords } from '#src/lib/shortcuts.ts';
import { useStore } from '#src/lib/store.ts';
import { Dialog } from './dialog.tsx';

/** Keys that belong to parts of the page rather than to a command. */
const IN_PLACE = [
  { keys: '↑ ↓', label: 'Next row of a table, next entry of a menu' },
  { keys: 'Enter', label: 'Take the row, open the entry' },
  { keys: '← →', label: 'Next interval in the tray; with Shift, take it as well' },
  { keys: '+ −', label: 'Depth larger or smaller in the tray' },
  { keys: 'Esc', label: 'Close what floats; clear the selection' },
  { keys: 'F8', label: 'Go to the latest notice' },
];

/** All keys in force on this page. */
export function ShortcutSheet() {
  const isOpen = useStore(shortcutSheetOpen);
  const commands = useCommandList();
  const withKeys = commands.flatMap(({ keys, ...command }) => (keys ? [{ ...command, keys }] : []));
  const groups = [...new Set(withKeys.map(({ group }) => group))];
  return (
    <Dialog isOpen={isOpen} onClose={() => shortcutSheetOpen.set(false)} title="Keys" width="wide">
      <div className="grid gap-x-6 gap-y-4 md:grid-cols-2">
        {groups.map((group) => (
          <KeyList
            key={group}
            heading={group}
            entries={withKeys
              .filter((command) => command.group === group)
              .map(({ id, label, keys }) => ({ id, label, keys: keysInWords(keys) }))}
          />
        ))}
        <KeyList
          heading="In place"
          entries={IN_PLACE.map((entry) => ({ ...entry, id: entry.label }))}
        />
      </div>
    </Dialog>
  );
}

function KeyList({
  heading,
  entries,
}: {
  heading: string;
  entries: readonly { id: string; label: string; keys: string }[];
}) {
  return (
    <section>
      <h3 className="mb-1 text-caption font-semibold text-ink-3">{heading}</h3>
      <dl className="m-0 grid grid-cols-[auto_1fr] items-baseline gap-x-3 gap-y-1 text-small">
        {entries.map(({ id, label, keys }) => (
          <div key={id} className="contents">
            <dt className="text-right">
              <kbd>{keys}</kbd>
            </dt>
            <dd className="m-0">{label}</dd>
          </div>
        ))}
      </dl>
    </section>
  );
}
