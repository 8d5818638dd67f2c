import { createStore, useStore } from '#src/lib/store.ts';

/** The job last asked for on each file, so that a page opened again goes on following it. */
const jobIds = createStore<ReadonlyMap<number, number>>(new Map());

export const noteJob = (uploadId: number, jobId: number): void => jobIds.set(new Map(jobIds.get()).set(uploadId, jobId));

export const useJobId = (uploadId: number): number | null => useStore(jobIds).get(uploadId) ?? null;
