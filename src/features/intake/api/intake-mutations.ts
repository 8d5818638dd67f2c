import { useMutation, useQueryClient, type QueryClient } from '@tanstack/react-query';
import { checkFile, discardUpload, loadFile, saveMapping, useRevision as makeCurrent, type FileMapping } from '#contract/files.ts';
import { call } from '#src/lib/api-client.ts';
import { depositsQuery, snapshotQuery, stagesQuery } from '#src/lib/deposit-queries.ts';
import { jobsQuery, rememberJob } from '#src/lib/jobs.ts';
import { dropDraft } from '../draft-store.ts';
import { revisionsQuery, uploadQuery, uploadsQuery } from './intake-queries.ts';

/** Files came or went: the list and what waits in the rail read otherwise. */
export function refreshUploads(queryClient: QueryClient, depositId: number): void {
  void queryClient.invalidateQueries({ queryKey: uploadsQuery(depositId).queryKey });
  void queryClient.invalidateQueries({ queryKey: stagesQuery(depositId).queryKey });
}

/** Tables in force changed. */
export function refreshTables(queryClient: QueryClient, depositId: number): void {
  refreshUploads(queryClient, depositId);
  for (const { queryKey } of [revisionsQuery(depositId), snapshotQuery(depositId), jobsQuery(depositId)]) void queryClient.invalidateQueries({ queryKey });
  void queryClient.invalidateQueries({ queryKey: depositsQuery().queryKey, exact: true });
}

/** Saves what each column is. Saves of one file run one after the other, so the last one stands. */
export function useSaveMapping(depositId: number, uploadId: number) {
  const queryClient = useQueryClient();
  return useMutation({
    scope: { id: `mapping-${uploadId}` },
    mutationFn: (body: FileMapping) => call(saveMapping, { params: { depositId, uploadId }, body }),
    onSuccess: (upload, sent) => {
      queryClient.setQueryData(uploadQuery(depositId, uploadId).queryKey, upload);
      dropDraft(uploadId, sent);
      void queryClient.invalidateQueries({ queryKey: uploadsQuery(depositId).queryKey, exact: true });
    },
  });
}

export function useDiscard(depositId: number) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (uploadId: number) => call(discardUpload, { params: { depositId, uploadId } }),
    onSuccess: (_done, uploadId) => {
      queryClient.removeQueries({ queryKey: uploadQuery(depositId, uploadId).queryKey });
      refreshUploads(queryClient, depositId);
    },
  });
}

export function useCheckFile(depositId: number, uploadId: number) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: () => call(checkFile, { params: { depositId, uploadId } }),
    onSuccess: ({ job }) => void rememberJob(queryClient, job),
  });
}

export function useLoadFile(depositId: number, uploadId: number) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (mode: 'replace' | 'add') => call(loadFile, { params: { depositId, uploadId }, body: { mode } }),
    onSuccess: ({ job }) => void rememberJob(queryClient, job),
  });
}

/** Makes a revision the one in force, back or forward. */
export function useMakeCurrent(depositId: number) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (revisionId: number) => call(makeCurrent, { params: { depositId, revisionId } }),
    onSuccess: () => refreshTables(queryClient, depositId),
  });
}
