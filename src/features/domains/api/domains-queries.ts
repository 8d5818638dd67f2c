import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import {
  createDomain, deleteDomain, gatherEvidence, getEvidence, restoreDomain, updateDomain, type Domain, type DomainBody,
} from '#contract/domains.ts';
import { call } from '#src/lib/api-client.ts';
import { domainListQuery } from '#src/lib/analysis-queries.ts';
import { rememberJob } from '#src/lib/jobs.ts';

export const evidenceQuery = (depositId: number, domainId: number) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'evidence', domainId],
    queryFn: ({ signal }) => call(getEvidence, { params: { depositId, domainId } }, signal),
  });

function useRefreshDomains(depositId: number) {
  const queryClient = useQueryClient();
  return () => queryClient.invalidateQueries({ queryKey: domainListQuery(depositId).queryKey });
}

/** Accepts groups as a candidate domain; pending until the list is fresh again. */
export function useCreateDomain(depositId: number) {
  const refresh = useRefreshDomains(depositId);
  return useMutation({
    mutationFn: (body: DomainBody) => call(createDomain, { params: { depositId }, body }),
    onSuccess: refresh,
  });
}

export function useUpdateDomain(depositId: number, domain: Domain) {
  const refresh = useRefreshDomains(depositId);
  return useMutation({
    mutationFn: (body: DomainBody) =>
      call(updateDomain, { params: { depositId, domainId: domain.id }, body, ifMatch: domain.version }),
    onSuccess: refresh,
  });
}

/** Takes a domain back. `onTaken` gets the way to put it there again, even where its page has closed meanwhile. */
export function useTakeBack(depositId: number, onTaken: (domain: Domain, undo: () => Promise<void>) => void) {
  const refresh = useRefreshDomains(depositId);
  return useMutation({
    mutationFn: async ({ id, version }: Domain) => {
      await call(deleteDomain, { params: { depositId, domainId: id }, ifMatch: version });
      return async () => {
        await call(restoreDomain, { params: { depositId, domainId: id } });
        await refresh();
      };
    },
    onSuccess: (undo, domain) => {
      onTaken(domain, undo);
      return refresh();
    },
  });
}

export function useGatherEvidence(depositId: number) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (domainIds: number[]) => call(gatherEvidence, { params: { depositId }, body: { domainIds } }),
    onSuccess: ({ job }) => rememberJob(queryClient, job),
  });
}
