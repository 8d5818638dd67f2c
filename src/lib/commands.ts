import { useEffect } from 'react';
import { createStore, useStore } from './store.ts';

/** Something that can be found and done from the palette, and by its keys where it has any. */
export interface Command {
  id: string;
  label: string;
  /** Heading in the palette and the shortcut sheet. */
  group: string;
  run: () => void;
  /** "mod+k", "g d", "?"; `mod` is Ctrl, or ⌘ on a Mac. */
  keys?: string;
  /** Further words to find it by. */
  words?: string[];
  /** Keys only: not listed in the palette. */
  isHidden?: boolean;
}

const commandStore = createStore<readonly Command[]>([]);

/**
 * Offers commands while the component is shown.
 *
 * @param commands Memoise it (`useMemo`): a new list is taken as a change.
 */
export function useCommands(commands: readonly Command[]): void {
  useEffect(() => {
    commandStore.set([...commandStore.get(), ...commands]);
    return () =>
      commandStore.set(commandStore.get().filter((command) => !commands.includes(command)));
  }, [commands]);
}

export const useCommandList = (): readonly Command[] => useStore(commandStore);
export const currentCommands = (): readonly Command[] => commandStore.get();

export const paletteOpen = createStore(false);
export const shortcutSheetOpen = createStore(false);
