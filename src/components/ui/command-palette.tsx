import { Command as Cmdk } from 'cmdk';
import { Search } from 'lucide-react';
import { Dialog } from 'radix-ui';
import { useEffect, useRef, useState } from 'react';
import { paletteOpen, useCommandList, type Command } from '#src/lib/commands.ts';
import { keysInWords } from '#src/lib/shortcuts.ts';
import { useStore } from '#src/lib/store.ts';
import { FLOATING, OVERLAY } from './dialog.tsx';
import { Icon } from './icon.tsx';

const GROUP =
  '[&_[cmdk-group-heading]]:px-2.5 [&_[cmdk-group-heading]]:py-1 [&_[cmdk-group-heading]]:text-caption [&_[cmdk-group-heading]]:font-semibold [&_[cmdk-group-heading]]:text-ink-3';

/** Find or do: every place and every command on offer, by any of their words. */
export function CommandPalette() {
  const isOpen = useStore(paletteOpen);
  const commands = useCommandList().filter(({ isHidden }) => !isHidden);
  const groups = [...new Set(commands.map(({ group }) => group))];
  const list = useRef<HTMLDivElement>(null);
  const [typed, setTyped] = useState('');
  const [chosen, setChosen] = useState('');
  useEffect(() => {
    // The list names the entry chosen before it was filtered; readers need the one chosen now.
    const frame = requestAnimationFrame(() => nameChosen(list.current));
    return () => cancelAnimationFrame(frame);
  }, [typed, chosen]);
  return (
    <Dialog.Root open={isOpen} onOpenChange={paletteOpen.set}>
      <Dialog.Portal>
        <Dialog.Overlay className={OVERLAY} />
        <Dialog.Content
          aria-describedby={undefined}
          className={`${FLOATING} top-[10vh] w-[calc(100vw-2rem)] max-w-[34rem] overflow-hidden`}
        >
          <Dialog.Title className="sr-only">Find or do</Dialog.Title>
          <Cmdk ref={list} label="Find or do" loop onValueChange={setChosen}>
            <div className="flex items-center gap-2 border-b border-rule px-3">
              <Icon icon={Search} className="text-ink-3" />
              <Cmdk.Input
                onValueChange={setTyped}
                placeholder="A stage, a deposit, a command"
                className="h-11 flex-1 border-0 bg-transparent text-body text-ink outline-none placeholder:text-ink-3"
              />
              <kbd>Esc</kbd>
            </div>
            <Cmdk.List
              label="Places and commands"
              className="max-h-[min(24rem,60dvh)] overflow-auto p-1"
            >
              <Cmdk.Empty className="px-2.5 py-3 text-body text-ink-2">
                Nothing of that name here.
              </Cmdk.Empty>
              {groups.map((group) => (
                <Cmdk.Group key={group} heading={group} className={GROUP}>
                  {commands
                    .filter((command) => command.group === group)
                    .map((command) => (
                      <Item key={command.id} command={command} />
                    ))}
                </Cmdk.Group>
              ))}
            </Cmdk.List>
          </Cmdk>
        </Dialog.Content>
      </Dialog.Portal>
    </Dialog.Root>
  );
}

function nameChosen(list: HTMLElement | null): void {
  const id = list?.querySelector('[cmdk-item][aria-selected="true"]')?.id;
  for (const owner of list?.querySelectorAll('[cmdk-input], [cmdk-list]') ?? []) {
    if (id) owner.setAttribute('aria-activedescendant', id);
    else owner.removeAttribute('aria-activedescendant');
  }
}

function Item({ command }: { command: Command }) {
  const { id, label, keys, words = [], run } = command;
  const onSelect = () => {
    paletteOpen.set(false);
    run();
  };
  return (
    <Cmdk.Item
      value={id}
      keywords={[label, ...words]}
      onSelect={onSelect}
      className="flex min-h-8 cursor-pointer items-center gap-2 rounded-2 px-2.5 text-body text-ink data-[selected=true]:bg-trough data-[selected=true]:shadow-[inset_3px_0_0_var(--copper)] max-md:min-h-11"
    >
      <span className="min-w-0 flex-1 truncate">{label}</span>
      {keys && <kbd>{keysInWords(keys)}</kbd>}
    </Cmdk.Item>
  );
}
