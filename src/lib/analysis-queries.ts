import { queryOptions } from '@tanstack/react-query';
import { listComponentRuns } from '#contract/components.ts';
import { listDomains } from '#contract/domains.ts';
import { listGroupings, listSweeps } from '#contract/groupings.ts';
import { getHole } from '#contract/holes.ts';
import { listSuites } from '#contract/suites.ts';
import { call } from './api-client.ts';

/** Reads more than one stage needs; see `deposit-queries.ts` for how keys are made. */
export const suitesQuery = (depositId: number) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'suites'],
    queryFn: ({ signal }) => call(listSuites, { params: { depositId } }, signal),
  });

export const componentRunsQuery = (depositId: number) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'component-runs'],
    queryFn: ({ signal }) => call(listComponentRuns, { params: { depositId } }, signal),
  });

export const sweepsQuery = (depositId: number) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'sweeps'],
    queryFn: ({ signal }) => call(listSweeps, { params: { depositId } }, signal),
  });

export const groupingsQuery = (depositId: number) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'groupings'],
    queryFn: ({ signal }) => call(listGroupings, { params: { depositId } }, signal),
  });

export const domainListQuery = (depositId: number) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'domains'],
    queryFn: ({ signal }) => call(listDomains, { params: { depositId } }, signal),
  });

/** One hole with its logs, structures and assays, as the current snapshot has them. */
export const holeQuery = (depositId: number, hole: string) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'holes', hole],
    queryFn: ({ signal }) => call(getHole, { params: { depositId, hole } }, signal),
  });
