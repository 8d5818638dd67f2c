import { Command } from 'cmdk';
import { Plus } from 'lucide-react';
import { Popover } from 'radix-ui';
import { useState } from 'react';
import { Button } from '#src/components/ui/button.tsx';

interface Props {
  /** Holes not in the tray yet. */
  names: readonly string[];
  onAdd: (name: string) => void;
}

const MOST_SHOWN = 40;

/** Names that hold the text, those that start with it first. */
export function matchingHoles(names: readonly string[], text: string): string[] {
  const wanted = text.trim().toLowerCase();
  const found = names.filter((name) => name.toLowerCase().includes(wanted));
  return found.sort((a, b) => Number(b.toLowerCase().startsWith(wanted)) - Number(a.toLowerCase().startsWith(wanted)));
}

/** Adds a hole to the tray by name. */
export function HolePicker({ names, onAdd }: Props) {
  const [isOpen, setOpen] = useState(false);
  const [text, setText] = useState('');
  const found = matchingHoles(names, text);
  return (
    <Popover.Root open={isOpen} onOpenChange={setOpen}>
      <Popover.Trigger asChild>
        <Button size="tiny" icon={Plus} aria-label="Add a hole to the tray" className="!bg-transparent">
          Hole
        </Button>
      </Popover.Trigger>
      <Popover.Portal>
        <Popover.Content side="top" align="start" sideOffset={4} collisionPadding={8} className="opens z-40 w-56 rounded-3 border border-rule bg-sheet p-1.5 shadow-float">
          <Command shouldFilter={false} label="Holes">
            <label className="grid gap-0.5 px-1 text-caption text-ink-2">
              Hole
              <Command.Input value={text} onValueChange={setText} className="h-8 rounded-2 border border-rule-firm bg-sheet px-2 font-mono text-small text-ink" />
            </label>
            <Command.List className="mt-1 max-h-56 overflow-auto font-mono text-small">
              <Command.Empty className="px-2 py-1 font-ui text-ink-3">No hole outside the tray has “{text}” in its name.</Command.Empty>
              {found.slice(0, MOST_SHOWN).map((name) => (
                <Command.Item
                  key={name}
                  value={name}
                  className="cursor-pointer rounded-1 px-2 py-1 data-[selected=true]:bg-trough"
                  onSelect={() => {
                    onAdd(name);
                    setOpen(false);
                    setText('');
                  }}
                >
                  {name}
                </Command.Item>
              ))}
            </Command.List>
            {found.length > MOST_SHOWN && <p className="px-2 pt-1 text-caption text-ink-3">{found.length - MOST_SHOWN} more: type part of the name.</p>}
          </Command>
        </Popover.Content>
      </Popover.Portal>
    </Popover.Root>
  );
}
