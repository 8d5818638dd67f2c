import type { WaitingJob } from './jobs.repository.ts';

/**
 * Whose turn it is: the oldest job of the next deposit in the round, so that a long queue of one
 * deposit never holds up another. A deposit has one job running at most; a job that must run alone
 * waits for the others and then keeps them waiting.
 *
 * @param waiting In the order they came.
 * @param lastDepositId Deposit served last; the round goes by ascending id and starts again.
 */
export function nextInTurn(
  waiting: readonly WaitingJob[],
  running: readonly WaitingJob[],
  lastDepositId: number,
): WaitingJob | null {
  if (running.some(({ runsAlone }) => runsAlone)) return null;
  const busy = new Set(running.map(({ depositId }) => depositId));
  const first = new Map<number, WaitingJob>();
  for (const job of waiting) {
    if (!busy.has(job.depositId) && !first.has(job.depositId)) first.set(job.depositId, job);
  }
  const round = [...first.values()].sort((a, b) => a.depositId - b.depositId);
  const next = round.find(({ depositId }) => depositId > lastDepositId) ?? round[0] ?? null;
  return next?.runsAlone && running.length > 0 ? null : next;
}
