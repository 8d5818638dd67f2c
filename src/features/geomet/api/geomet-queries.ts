import { keepPreviousData, queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import { getZoneRules, listZoneRuns, listZones, saveZoneRules, startZones, type ZoneRules } from '#contract/geomet.ts';
import { call } from '#src/lib/api-client.ts';
import { rememberJob } from '#src/lib/jobs.ts';
import { notify } from '#src/lib/toasts.ts';

export const ZONE_PAGE = 200;

export const rulesQuery = (depositId: number) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'zone-rules'],
    queryFn: ({ signal }) => call(getZoneRules, { params: { depositId } }, signal),
  });

export const zoneRunsQuery = (depositId: number) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'zone-runs'],
    queryFn: ({ signal }) => call(listZoneRuns, { params: { depositId } }, signal),
  });

export const zonesQuery = (depositId: number, runId: number, analyte: string, page: number) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'zone-runs', runId, 'zones', analyte, page],
    queryFn: ({ signal }) =>
      call(listZones, { params: { depositId, runId }, query: { page, pageSize: ZONE_PAGE, ...(analyte ? { analyte } : {}) } }, signal),
    placeholderData: keepPreviousData,
    staleTime: Infinity,
  });

/** Saves limits on top of the version last read; the runs on older limits turn stale, and the form begins anew on what was saved. */
export function useSaveRules(depositId: number) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: ({ rules, version }: { rules: ZoneRules; version: number }) =>
      call(saveZoneRules, { params: { depositId }, body: rules, ifMatch: version }),
    onSuccess: async (saved) => {
      queryClient.setQueryData(rulesQuery(depositId).queryKey, saved);
      notify('Limits saved');
      await queryClient.invalidateQueries({ queryKey: zoneRunsQuery(depositId).queryKey });
    },
  });
}

export function useStartZones(depositId: number) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: () => call(startZones, { params: { depositId } }),
    onSuccess: ({ job }) => rememberJob(queryClient, job),
  });
}
