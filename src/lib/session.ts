import {
  queryOptions,
  useMutation,
  useQuery,
  useQueryClient,
  type QueryClient,
} from '@tanstack/react-query';
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

/** Begins a session in the page: nothing of a person before is left. */
export function enterSession(queryClient: QueryClient, me: Me): void {
  leaveSession(queryClient);
  setPreferencePerson(me.id);
  queryClient.setQueryData(meQuery().queryKey, me);
}

/** Empties what was read, what was taken and what could be undone. */
export function leaveSession(queryClient: QueryClient): void {
  queryClient.clear();
  clearSelection();
  forgetEdits();
  setPreferencePerson(null);
}

/** Signs out. A session that had ended already counts as done. */
export function useSignOut(onDone: () => void) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: () =>
      call(signOut, {}).catch((error: unknown) => {
        if (!hasStatus(error, 401)) throw error;
      }),
    onSuccess: () => {
      leaveSession(queryClient);
      onDone();
    },
  });
}
