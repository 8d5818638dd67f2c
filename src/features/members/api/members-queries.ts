import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import {
  changeMemberRole,
  createToken,
  inviteMember,
  listMembers,
  listTokens,
  removeMember,
  revokeToken,
  withdrawInvitation,
  type InviteInput,
} from '#contract/deposits.ts';
import type { Role, TokenRight } from '#contract/roles.ts';
import { call } from '#src/lib/api-client.ts';
import { depositQuery } from '#src/lib/deposit-queries.ts';

export const membersQuery = (depositId: number) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'members'],
    queryFn: ({ signal }) => call(listMembers, { params: { depositId } }, signal),
  });

export const tokensQuery = (depositId: number) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'tokens'],
    queryFn: ({ signal }) => call(listTokens, { params: { depositId } }, signal),
  });

/** Everything a change of people alters: the list, and who leads. */
function useRefreshMembers(depositId: number) {
  const queryClient = useQueryClient();
  return () => {
    void queryClient.invalidateQueries({ queryKey: membersQuery(depositId).queryKey });
    void queryClient.invalidateQueries({ queryKey: depositQuery(depositId).queryKey });
  };
}

export function useInvite(depositId: number) {
  const onSuccess = useRefreshMembers(depositId);
  return useMutation({
    mutationFn: (body: InviteInput) => call(inviteMember, { params: { depositId }, body }),
    onSuccess,
  });
}

export function useWithdrawInvitation(depositId: number) {
  const onSuccess = useRefreshMembers(depositId);
  return useMutation({
    mutationFn: (invitationId: number) =>
      call(withdrawInvitation, { params: { depositId, invitationId } }),
    onSuccess,
  });
}

export function useChangeRole(depositId: number) {
  const onSuccess = useRefreshMembers(depositId);
  return useMutation({
    mutationFn: ({ userId, role }: { userId: number; role: Role }) =>
      call(changeMemberRole, { params: { depositId, userId }, body: { role } }),
    onSuccess,
  });
}

export function useRemoveMember(depositId: number) {
  const onSuccess = useRefreshMembers(depositId);
  return useMutation({
    mutationFn: (userId: number) => call(removeMember, { params: { depositId, userId } }),
    onSuccess,
  });
}

export function useCreateToken(depositId: number) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: { name: string; right: TokenRight; days: number }) =>
      call(createToken, { params: { depositId }, body }),
    onSuccess: () => queryClient.invalidateQueries({ queryKey: tokensQuery(depositId).queryKey }),
  });
}

export function useRevokeToken(depositId: number) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (tokenId: number) => call(revokeToken, { params: { depositId, tokenId } }),
    onSuccess: () => queryClient.invalidateQueries({ queryKey: tokensQuery(depositId).queryKey }),
  });
}
