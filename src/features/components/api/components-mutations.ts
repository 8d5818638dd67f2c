import { useMutation, useQueryClient } from '@tanstack/react-query';
import { startComponents } from '#contract/components.ts';
import { call } from '#src/lib/api-client.ts';
import { rememberJob } from '#src/lib/jobs.ts';

/** Runs log-ratio components on a suite and the current snapshot; the job shows on the page. */
export function useStartComponents(depositId: number) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: { suiteId: number; seed: number }) => call(startComponents, { params: { depositId }, body }),
    onSuccess: ({ job }) => rememberJob(queryClient, job),
  });
}
