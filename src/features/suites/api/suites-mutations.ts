import { useMutation, useQueryClient } from '@tanstack/react-query';
import { createSuite, deleteSuite, type Suite, type SuiteBody } from '#contract/suites.ts';
import { suitesQuery } from '#src/lib/analysis-queries.ts';
import { call } from '#src/lib/api-client.ts';

export function useCreateSuite(depositId: number) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: SuiteBody) => call(createSuite, { params: { depositId }, body }),
    onSuccess: () => queryClient.invalidateQueries({ queryKey: suitesQuery(depositId).queryKey }),
  });
}

/** Deletes a suite nothing stands on. */
export function useDeleteSuite(depositId: number) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: ({ id, version }: Suite) =>
      call(deleteSuite, { params: { depositId, suiteId: id }, ifMatch: version }),
    onSuccess: () => queryClient.invalidateQueries({ queryKey: suitesQuery(depositId).queryKey }),
  });
}
