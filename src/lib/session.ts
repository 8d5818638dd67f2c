import { queryOptions, useMutation, useQuery, useQueryClient, type QueryClient } from '@tanstack/react-query';
import { getInstance, getMe, signOut, type Me } from '#contract/auth.ts';
import { call } from './api-client.ts';
import { hasStatus } from './api-problem.ts';
import { setPreferencePerson } from './preferences.ts';
import { clearSelection } from './selection.ts';
import { forgetEdits } from './undo.ts';

export const meQuery = () =>
  queryOptions({
    queryKey: ['me'],
    queryFn: ({ signal }) => call(getMe, {}, signal),
    staleTime: Infinity,
  });

export const instanceQuery = () =>
  queryOptions({
    queryKey: ['instance'],
    queryFn: ({ signal }) => call(getInstance, {}, signal),
    staleTime: Infinity,
  });

/** Who is signed in; undefined before it is known and on the pages before sign-in. */
export const useMe = (): Me | undefined => useQuery({ ...meQuery(), enabled: false }).data;

/** Read before the sign-in and of no person's session; the page of an accepted invitation still shows it. */
const READ_BY_ANYBODY: readonly unknown[] = ['instance', 'invitations'];

/** Begins a session in the page: nothing of a person before is left. */
export function enterSession(queryClient: QueryClient, me: Me): void {
  queryClient.removeQueries({ predicate: ({ queryKey }) => !READ_BY_ANYBODY.includes(queryKey[0]) });
  clearSelection();
  forgetEdits();
  setPreferencePerson(me.id);
  queryClient.setQueryData(meQuery().queryKey, me);
}

let isLeaving = false;
/** A person is signing out: refusals that follow are no reason to ask for the sign-in back here. */
export const isSigningOut = (): boolean => isLeaving;

/**
 * Signs out. A session that had ended already counts as done.
 *
 * @param onDone Leaves by a full load, so that nothing read stays in memory.
 */
export function useSignOut(onDone: () => void) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: () =>
      call(signOut, {}).catch((error: unknown) => {
        if (!hasStatus(error, 401)) throw error;
      }),
    onMutate: () => {
      isLeaving = true;
      return queryClient.cancelQueries();
    },
    onError: () => void (isLeaving = false),
    onSuccess: onDone,
  });
}
