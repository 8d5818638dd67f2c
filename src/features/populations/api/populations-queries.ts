import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type * as z from 'zod';
import { getScreenCell, listScreens, startScreen } from '#contract/screens.ts';
import { call } from '#src/lib/api-client.ts';
import { rememberJob } from '#src/lib/jobs.ts';

export type ScreenRequest = z.input<NonNullable<typeof startScreen.body>>;

export const screensQuery = (depositId: number) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'screens'],
    queryFn: ({ signal }) => call(listScreens, { params: { depositId } }, signal),
  });

/** A cell never changes once its screen is done. */
export const cellQuery = (depositId: number, screenId: number, subset: string, variable: string) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'screens', screenId, subset, variable],
    queryFn: ({ signal }) =>
      call(getScreenCell, { params: { depositId, screenId }, query: { subset, variable } }, signal),
    staleTime: Infinity,
  });

/** Starts a screen; the answer is its job. */
export function useStartScreen(depositId: number) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: ScreenRequest) =>
      call(startScreen, { params: { depositId }, body }),
    onSuccess: ({ job }) => rememberJob(queryClient, job),
  });
}
