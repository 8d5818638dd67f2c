import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import { inviteUser, listAllDeposits, listUsers, resetDemo, updateUser } from '#contract/admin.ts';
import { call } from '#src/lib/api-client.ts';
import { depositsQuery } from '#src/lib/deposit-queries.ts';

export const usersQuery = () =>
  queryOptions({
    queryKey: ['admin', 'users'],
    queryFn: ({ signal }) => call(listUsers, {}, signal),
  });

export const allDepositsQuery = () =>
  queryOptions({
    queryKey: ['admin', 'deposits'],
    queryFn: ({ signal }) => call(listAllDeposits, {}, signal),
  });

export function useInviteUser() {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: { email: string }) => call(inviteUser, { body }),
    onSuccess: () => queryClient.invalidateQueries({ queryKey: usersQuery().queryKey }),
  });
}

interface UserChange {
  userId: number;
  isActive?: boolean;
  isAdministrator?: boolean;
}

export function useUpdateUser() {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: ({ userId, ...body }: UserChange) => call(updateUser, { params: { userId }, body }),
    onSuccess: () => queryClient.invalidateQueries({ queryKey: usersQuery().queryKey }),
  });
}

/** Puts the demonstration back; everything read of its deposits is old. */
export function useResetDemo() {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: () => call(resetDemo, {}),
    onSuccess: () => {
      void queryClient.invalidateQueries({ queryKey: depositsQuery().queryKey });
      void queryClient.invalidateQueries({ queryKey: allDepositsQuery().queryKey });
      queryClient.removeQueries({ queryKey: ['tables'] });
    },
  });
}
