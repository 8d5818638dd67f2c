import { useQueryClient } from '@tanstack/react-query';
import { useCallback, useMemo, useSyncExternalStore } from 'react';
import { uploadFiles } from '#contract/files.ts';
import { upload } from '#src/lib/api-client.ts';
import { refreshUploads } from './api/intake-mutations.ts';
import { createUploadQueue, type QueuedFile } from './upload-queue.ts';

const queue = createUploadQueue((depositId, file, options) => {
  const form = new FormData();
  form.append('files', file);
  return upload(uploadFiles, { params: { depositId }, form }, options);
});

interface Sending {
  files: readonly QueuedFile[];
  add: (files: readonly File[]) => void;
  retry: (key: number) => void;
  cancel: (key: number) => void;
  clear: () => void;
}

/** Files of a deposit on their way to the server; they go on while other pages are open. */
export function useUploadQueue(depositId: number): Sending {
  const queryClient = useQueryClient();
  const all = useSyncExternalStore(queue.subscribe, queue.get, queue.get);
  const files = useMemo(() => all.filter((file) => file.depositId === depositId), [all, depositId]);
  const onKept = useCallback(() => refreshUploads(queryClient, depositId), [queryClient, depositId]);
  return {
    files,
    add: (given) => queue.add(depositId, given, onKept),
    retry: (key) => queue.retry(key, onKept),
    cancel: queue.cancel,
    clear: () => queue.clear(depositId),
  };
}
