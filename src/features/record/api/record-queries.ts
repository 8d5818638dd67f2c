import { keepPreviousData, queryOptions } from '@tanstack/react-query';
import { listAudit } from '#contract/record.ts';
import { call } from '#src/lib/api-client.ts';

export const PAGE_SIZE = 100;

export const auditQuery = (depositId: number, text: string, page: number) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'record', text, page],
    queryFn: ({ signal }) =>
      call(
        listAudit,
        { params: { depositId }, query: { page, pageSize: PAGE_SIZE, ...(text ? { text } : {}) } },
        signal,
      ),
    placeholderData: keepPreviousData,
    staleTime: 10_000,
  });
