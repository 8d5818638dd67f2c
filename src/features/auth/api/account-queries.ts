import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import { changePassword, endSession, listSessions, updateMe } from '#contract/auth.ts';
import { call } from '#src/lib/api-client.ts';
import { meQuery } from '#src/lib/session.ts';

export const sessionsQuery = () =>
  queryOptions({ queryKey: ['sessions'], queryFn: ({ signal }) => call(listSessions, {}, signal) });

export function useUpdateName() {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: { name: string }) => call(updateMe, { body }),
    onSuccess: (me) => queryClient.setQueryData(meQuery().queryKey, me),
  });
}

export function useChangePassword() {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: { currentPassword: string; newPassword: string }) =>
      call(changePassword, { body }),
    onSuccess: () => queryClient.invalidateQueries({ queryKey: sessionsQuery().queryKey }),
  });
}

export function useEndSession() {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (sessionId: string) => call(endSession, { params: { sessionId } }),
    onSuccess: () => queryClient.invalidateQueries({ queryKey: sessionsQuery().queryKey }),
  });
}
