import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import { listCodeSets, makeCodes, verifyCodes } from '#contract/codes.ts';
import { call } from '#src/lib/api-client.ts';
import { rememberJob } from '#src/lib/jobs.ts';

export const codeSetsQuery = (depositId: number) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'code-sets'],
    queryFn: ({ signal }) => call(listCodeSets, { params: { depositId } }, signal),
  });

export function useMakeCodes(depositId: number) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: () => call(makeCodes, { params: { depositId } }),
    onSuccess: ({ job }) => rememberJob(queryClient, job),
  });
}

/** Makes a set again and compares the bytes. */
export const useVerifyCodes = (depositId: number, codeSetId: number) =>
  useMutation({ mutationFn: () => call(verifyCodes, { params: { depositId, codeSetId } }) });
