import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useCallback } from 'react';
import type { Upload } from '#contract/files.ts';
import { cancelJob, type Job } from '#contract/jobs.ts';
import type { PlateBusy } from '#src/components/ui/plate.tsx';
import { call } from '#src/lib/api-client.ts';
import { rememberJob, useJob } from '#src/lib/jobs.ts';
import { notifyProblem } from '#src/lib/toasts.ts';
import { refreshTables, useCheckFile, useLoadFile } from './api/intake-mutations.ts';
import { noteJob, useJobId } from './upload-jobs.ts';
import type { MappingDraft } from './use-mapping-draft.ts';

export interface FileWork {
  check: () => void;
  load: (mode: 'replace' | 'add') => void;
  isChecking: boolean;
  isLoading: boolean;
  /** For the plate where the work shows. */
  busy: PlateBusy | null;
  /** Why the last check or load did not end well. */
  error: Error | null;
}

const failure = (job: Job | undefined): Error | null => (job?.state === 'failed' ? new Error(job.error?.message ?? `${job.title}: failed`) : null);

/** Checks and loads one file as jobs, saving its mapping first. */
export function useFileWork(depositId: number, upload: Upload, draft: MappingDraft): FileWork {
  const queryClient = useQueryClient();
  const jobId = useJobId(upload.id);
  const onEnd = useCallback(() => refreshTables(queryClient, depositId), [queryClient, depositId]);
  const { job, isRunning } = useJob(depositId, jobId, onEnd);
  const checking = useCheckFile(depositId, upload.id);
  const loading = useLoadFile(depositId, upload.id);
  const cancelling = useMutation({
    mutationFn: (id: number) => call(cancelJob, { params: { depositId, jobId: id } }),
    onSuccess: (stopped) => void rememberJob(queryClient, stopped),
    onError: notifyProblem,
  });
  const follow = ({ job: started }: { job: Job }) => noteJob(upload.id, started.id);
  const kind = checking.isPending ? 'check-file' : loading.isPending ? 'load-file' : isRunning ? job?.kind : undefined;
  const busy = kind === undefined ? null : {
    progress: job?.state === 'running' ? job.progress : null,
    phase: job?.phase || 'starting',
    ...(isRunning && jobId !== null ? { onCancel: () => cancelling.mutate(jobId) } : {}),
  };
  return {
    // A refused save is shown at the columns; the check then does not start.
    check: () => void draft.settle().then(() => checking.mutate(undefined, { onSuccess: follow }), () => undefined),
    load: (mode) => loading.mutate(mode, { onSuccess: follow }),
    isChecking: kind === 'check-file',
    isLoading: kind === 'load-file',
    busy,
    error: checking.error ?? loading.error ?? (isRunning || draft.isDirty ? null : failure(job)),
  };
}
