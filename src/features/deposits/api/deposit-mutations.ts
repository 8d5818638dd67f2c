import { useMutation, useQueryClient } from '@tanstack/react-query';
import {
  createDeposit,
  updateDeposit,
  type Deposit,
  type DepositBodyInput,
} from '#contract/deposits.ts';
import { call } from '#src/lib/api-client.ts';
import { hasStatus } from '#src/lib/api-problem.ts';
import { depositQuery, depositsQuery } from '#src/lib/deposit-queries.ts';

export function useCreateDeposit(onCreated: (deposit: Deposit) => void) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: DepositBodyInput) => call(createDeposit, { body }),
    onSuccess: (deposit) => {
      queryClient.setQueryData(depositQuery(deposit.id).queryKey, deposit);
      void queryClient.invalidateQueries({ queryKey: depositsQuery().queryKey, exact: true });
      onCreated(deposit);
    },
  });
}

/** Changes a deposit unless someone else has meanwhile: then 412, and nothing is lost. */
export function useUpdateDeposit(depositId: number, onUpdated: () => void) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: ({ body, version }: { body: DepositBodyInput; version: number }) =>
      call(updateDeposit, { params: { depositId }, body, ifMatch: version }),
    onSuccess: (deposit) => {
      queryClient.setQueryData(depositQuery(depositId).queryKey, deposit);
      void queryClient.invalidateQueries({ queryKey: depositsQuery().queryKey });
      onUpdated();
    },
    onError: (error) => {
      if (hasStatus(error, 412))
        void queryClient.invalidateQueries({ queryKey: depositQuery(depositId).queryKey });
    },
  });
}
