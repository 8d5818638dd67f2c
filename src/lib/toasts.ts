import { ApiProblem } from './api-problem.ts';
import { createStore, useStore } from './store.ts';
import { noteEdit, undoEdit, type Edit } from './undo.ts';

export interface ToastNote {
  id: number;
  text: string;
  tone: 'plain' | 'bad';
  action: { label: string; run: () => void } | null;
}

const toastStore = createStore<readonly ToastNote[]>([]);
let lastId = 0;

function add(note: Omit<ToastNote, 'id'>): void {
  lastId += 1;
  toastStore.set([...toastStore.get(), { ...note, id: lastId }].slice(-4));
}

/** Says that something has been done. */
export const notify = (text: string, action?: { label: string; run: () => void }): void =>
  add({ text, tone: 'plain', action: action ?? null });

/** Says what went wrong where no form can show it. */
export const notifyProblem = (error: unknown): void =>
  add({ text: problemText(error), tone: 'bad', action: null });

/** Says what was edited, offers Undo, and keeps the edit for Ctrl Z. */
export function notifyEdit(edit: Edit): void {
  noteEdit(edit);
  const run = () => void undoEdit(edit).catch(notifyProblem);
  add({ text: edit.label, tone: 'plain', action: { label: 'Undo', run } });
}

export function problemText(error: unknown): string {
  if (error instanceof ApiProblem) return `${error.problem.title}. ${error.problem.detail}`;
  return error instanceof Error ? error.message : String(error);
}

export const dismissToast = (id: number): void =>
  toastStore.set(toastStore.get().filter((note) => note.id !== id));

export const useToasts = (): readonly ToastNote[] => useStore(toastStore);
