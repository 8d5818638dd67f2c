import { useMutation, useQueryClient } from '@tanstack/react-query';
import { createSuite, deleteSuite, updateSuite, type Suite, type SuiteBody } from '#contract/suites.ts';
import { suitesQuery } from '#src/lib/analysis-queries.ts';
import { call } from '#src/lib/api-client.ts';
import { notifyEdit, notifyProblem } from '#src/lib/toasts.ts';

export function useCreateSuite(depositId: number) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: SuiteBody) => call(createSuite, { params: { depositId }, body }),
    onSuccess: () => queryClient.invalidateQueries({ queryKey: suitesQuery(depositId).queryKey }),
  });
}

/** Deletes a suite nothing stands on, with the way back. Its row is gone by then, so the notice is given here. */
export function useDeleteSuite(depositId: number) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: ({ id, version }: Suite) =>
      call(deleteSuite, { params: { depositId, suiteId: id }, ifMatch: version }),
    onSuccess: (_, suite) => {
      const undo = async () => {
        await call(createSuite, { params: { depositId }, body: bodyOf(suite, suite.name) });
        await queryClient.invalidateQueries({ queryKey: suitesQuery(depositId).queryKey });
      };
      notifyEdit({ label: `“${suite.name}” deleted`, undo });
      return queryClient.invalidateQueries({ queryKey: suitesQuery(depositId).queryKey });
    },
    onError: notifyProblem,
  });
}

const bodyOf = ({ note, support, analytes, replacementFraction }: Suite, name: string): SuiteBody => ({ name, note, support, analytes, replacementFraction });

/** Renames a suite, with the way back. */
export function useRenameSuite(depositId: number) {
  const queryClient = useQueryClient();
  const { queryKey } = suitesQuery(depositId);
  const rename = async (suiteId: number, name: string): Promise<void> => {
    const suite = queryClient.getQueryData(queryKey)?.find(({ id }) => id === suiteId);
    if (suite === undefined) return;
    const renamed = await call(updateSuite, { params: { depositId, suiteId }, body: bodyOf(suite, name), ifMatch: suite.version });
    queryClient.setQueryData(queryKey, (suites) => suites?.map((other) => (other.id === suiteId ? renamed : other)));
  };
  return useMutation({
    mutationFn: async ({ suite, name }: { suite: Suite; name: string }) => {
      await rename(suite.id, name);
      notifyEdit({ label: `“${suite.name}” is now “${name}”`, undo: () => rename(suite.id, suite.name), redo: () => rename(suite.id, name) });
    },
    onError: (error) => {
      notifyProblem(error);
      void queryClient.invalidateQueries({ queryKey });
    },
  });
}
