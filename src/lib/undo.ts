import { createStore, useStore } from './store.ts';

/** One edit of this session, with the way back and the way forth again. */
export interface Edit {
  /** What was done, in words: "4 intervals moved to 2110". */
  label: string;
  undo: () => void | Promise<unknown>;
  redo?: () => void | Promise<unknown>;
}

interface Edits {
  past: readonly Edit[];
  future: readonly Edit[];
}

const MOST_KEPT = 100;
const editsStore = createStore<Edits>({ past: [], future: [] });

/** Notes an edit that has been made. What had been undone before can no longer be redone. */
export function noteEdit(edit: Edit): void {
  const { past } = editsStore.get();
  editsStore.set({ past: [...past, edit].slice(-MOST_KEPT), future: [] });
}

/** Takes the last edit back. @returns it, or null when there is none. */
export async function undoLast(): Promise<Edit | null> {
  const { past, future } = editsStore.get();
  const edit = past.at(-1);
  if (!edit) return null;
  editsStore.set({ past: past.slice(0, -1), future: edit.redo ? [...future, edit] : [] });
  await edit.undo();
  return edit;
}

/** Takes one given edit back, if it still stands: the Undo of its own notice. */
export async function undoEdit(edit: Edit): Promise<void> {
  const { past, future } = editsStore.get();
  if (!past.includes(edit)) return;
  const isLast = past.at(-1) === edit;
  editsStore.set({
    past: past.filter((other) => other !== edit),
    future: isLast && edit.redo ? [...future, edit] : future,
  });
  await edit.undo();
}

export async function redoLast(): Promise<Edit | null> {
  const { past, future } = editsStore.get();
  const edit = future.at(-1);
  if (!edit?.redo) return null;
  editsStore.set({ past: [...past, edit], future: future.slice(0, -1) });
  await edit.redo();
  return edit;
}

export const forgetEdits = (): void => editsStore.set({ past: [], future: [] });
export const useEdits = (): Edits => useStore(editsStore);
