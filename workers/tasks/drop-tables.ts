import { defineTask } from '../task.ts';

export interface DropTablesInput {
  /** The job whose unpublished tables go; null for all that no job will publish any more. */
  jobId: number | null;
}
export interface DropTablesOutput {
  done: true;
}

/** Removes tables a failed or cancelled job left behind: long rows, so not the server's own thread. */
export default defineTask<DropTablesInput, DropTablesOutput>(({ jobId }, { store }) => {
  if (jobId === null) store().dropLeftovers();
  else store().dropPending(jobId);
  return { done: true };
});
