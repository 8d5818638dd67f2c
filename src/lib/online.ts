import { useSyncExternalStore } from 'react';

let offlineSince: Date | null =
  typeof navigator !== 'undefined' && navigator.onLine === false ? new Date() : null;

function subscribe(listener: () => void): () => void {
  const onOnline = () => {
    offlineSince = null;
    listener();
  };
  const onOffline = () => {
    offlineSince = new Date();
    listener();
  };
  window.addEventListener('online', onOnline);
  window.addEventListener('offline', onOffline);
  return () => {
    window.removeEventListener('online', onOnline);
    window.removeEventListener('offline', onOffline);
  };
}

/** When the network went, or null while it is there. */
export const useOfflineSince = (): Date | null =>
  useSyncExternalStore(
    subscribe,
    () => offlineSince,
    () => null,
  );
