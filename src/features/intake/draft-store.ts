import type { FileMapping } from '#contract/files.ts';
import { createStore, useStore } from '#src/lib/store.ts';
import { sameMapping } from './mapping.ts';

/** Mappings changed and not yet saved, by upload: they outlive a visit to another page. */
const drafts = createStore<ReadonlyMap<number, FileMapping>>(new Map());

export const keepDraft = (uploadId: number, mapping: FileMapping): void => drafts.set(new Map(drafts.get()).set(uploadId, mapping));

/** Forgets a draft, unless it has been changed since `saved` was sent. */
export function dropDraft(uploadId: number, saved?: FileMapping): void {
  const draft = drafts.get().get(uploadId);
  if (!draft || (saved && !sameMapping(draft, saved))) return;
  const next = new Map(drafts.get());
  next.delete(uploadId);
  drafts.set(next);
}

export const useDraft = (uploadId: number): FileMapping | undefined => useStore(drafts).get(uploadId);
export const useDrafts = (): ReadonlyMap<number, FileMapping> => useStore(drafts);
