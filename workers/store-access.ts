import { openColumnStore, type ColumnStore } from '#server/db/column-store.ts';

/** A column store that is opened when first asked for, and closed if it was. */
export interface StoreAccess {
  open: () => ColumnStore;
  close: () => void;
}

/** The driver's ceiling. */
const MAPPED_BYTES = 2 ** 31 - 65_536;

/**
 * A store whose reads go through a memory map, which halves the time of a big one. Were the disk to
 * fail under the map, the process would end: so only the compute host may use this, never the server.
 */
export function openMappedStore(databaseFile: string): ColumnStore {
  const store = openColumnStore(databaseFile, { readonly: false });
  store.db.pragma(`mmap_size = ${MAPPED_BYTES}`);
  return store;
}

export function lazyStore(databaseFile: string): StoreAccess {
  let store: ColumnStore | null = null;
  return {
    open: () => (store ??= openMappedStore(databaseFile)),
    close: () => store?.close(),
  };
}
