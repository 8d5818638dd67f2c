import { QueryCache, QueryClient } from '@tanstack/react-query';
import { hasStatus, isPassing } from './api-problem.ts';

/**
 * The cache of what the server said. Reads are tried again with growing pauses when the network or
 * the server is away; a refusal is shown at once. Events of a deposit mark what has changed, so
 * data may stay for five minutes without asking again.
 *
 * @param onSignedOut Called when any read finds that the session has ended.
 */
export function makeQueryClient(onSignedOut: () => void): QueryClient {
  return new QueryClient({
    queryCache: new QueryCache({
      onError: (error, { queryKey }) => {
        // Asking who is signed in is answered by its own caller.
        if (hasStatus(error, 401) && queryKey[0] !== 'me') onSignedOut();
      },
    }),
    defaultOptions: {
      queries: {
        staleTime: 5 * 60_000,
        retry: (failures, error) => failures < 3 && isPassing(error),
        retryDelay: (failures) => Math.min(8000, 500 * 2 ** failures),
        refetchOnWindowFocus: false,
      },
      mutations: {
        // The same call carries the same Idempotency-Key, so a repeat has one effect.
        retry: false,
        networkMode: 'always',
      },
    },
  });
}
