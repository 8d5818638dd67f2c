import { keepPreviousData, queryOptions } from '@tanstack/react-query';
import { getUpload, listDemoFiles, listProblems, listRevisions, listUploads, previewRows, type FileMapping, type RowProblem } from '#contract/files.ts';
import { call } from '#src/lib/api-client.ts';
import { hasStatus } from '#src/lib/api-problem.ts';

export const uploadsQuery = (depositId: number) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'uploads'],
    queryFn: ({ signal }) => call(listUploads, { params: { depositId } }, signal),
  });

export const uploadQuery = (depositId: number, uploadId: number) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'uploads', uploadId],
    queryFn: ({ signal }) => call(getUpload, { params: { depositId, uploadId } }, signal),
  });

export const revisionsQuery = (depositId: number) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'revisions'],
    queryFn: ({ signal }) => call(listRevisions, { params: { depositId } }, signal),
  });

const PREVIEW_ROWS = 100;

/** The first rows as a mapping reads them; the collars in force decide which holes are known. */
export const previewQuery = (depositId: number, uploadId: number, mapping: FileMapping, collarRevision: number | null) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'upload-preview', uploadId, collarRevision, mapping],
    queryFn: ({ signal }) => call(previewRows, { params: { depositId, uploadId }, body: { mapping, rows: PREVIEW_ROWS } }, signal),
    placeholderData: keepPreviousData,
    staleTime: Infinity,
    gcTime: 60_000,
  });

export const PROBLEMS_A_PAGE = 100;

export interface ProblemFilter {
  page: number;
  severity?: RowProblem['severity'];
  code?: string;
}

export const problemsQuery = (depositId: number, uploadId: number, filter: ProblemFilter) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'uploads', uploadId, 'problems', filter],
    queryFn: ({ signal }) => call(listProblems, { params: { depositId, uploadId }, query: { ...filter, pageSize: PROBLEMS_A_PAGE } }, signal),
    placeholderData: keepPreviousData,
  });

/** Demonstration tables; none on an instance that has no demonstration. */
export const demoFilesQuery = () =>
  queryOptions({
    queryKey: ['demo-files'],
    queryFn: ({ signal }) =>
      call(listDemoFiles, {}, signal).catch((error: unknown) => {
        if (hasStatus(error, 404)) return [];
        throw error;
      }),
    staleTime: Infinity,
  });
