import { queryOptions } from '@tanstack/react-query';
import { getDeposit, getOverview, listDeposits, listStages } from '#contract/deposits.ts';
import { listHoles } from '#contract/holes.ts';
import { getSnapshot } from '#contract/snapshots.ts';
import { call } from './api-client.ts';

/**
 * Reads every stage needs. Keys are `['deposits', depositId, <path part after the deposit>, …]`:
 * an event naming a resource marks all under that key as old.
 */
export const depositsQuery = () =>
  queryOptions({
    queryKey: ['deposits'],
    queryFn: ({ signal }) => call(listDeposits, {}, signal),
  });

export const depositQuery = (depositId: number) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'deposit'],
    queryFn: ({ signal }) => call(getDeposit, { params: { depositId } }, signal),
  });

export const overviewQuery = (depositId: number) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'overview'],
    queryFn: ({ signal }) => call(getOverview, { params: { depositId } }, signal),
  });

export const stagesQuery = (depositId: number) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'stages'],
    queryFn: ({ signal }) => call(listStages, { params: { depositId } }, signal),
  });

export const snapshotQuery = (depositId: number) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'snapshot'],
    queryFn: ({ signal }) => call(getSnapshot, { params: { depositId } }, signal),
  });

export const holesQuery = (depositId: number) =>
  queryOptions({
    queryKey: ['deposits', depositId, 'holes'],
    queryFn: ({ signal }) => call(listHoles, { params: { depositId } }, signal),
  });
