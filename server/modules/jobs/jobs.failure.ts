import { KernelError } from '#kernels/kernel-error.ts';
import { AppError } from '#server/lib/errors.ts';
import { Cancelled, ComputeError } from '#workers/client.ts';

/** Why a running job was told to stop. */
export type StopReason = 'cancelled' | 'time-limit' | 'stopping';

/** A job that ends its process twice does not get a third try. */
export const MAX_TRIES = 2;

export interface Ending {
  state: 'failed' | 'cancelled' | 'interrupted';
  error: { code: string; message: string } | null;
  /** Run it again with nothing beside it, so that it can only take down itself. */
  runsAlone: boolean;
  /** This start does not count as a try. */
  givesTryBack: boolean;
  /** Ours to look into. */
  isFault: boolean;
}

const ending = (state: Ending['state'], code?: string, message?: string): Ending => ({
  state,
  error: code === undefined ? null : { code, message: message ?? '' },
  runsAlone: false,
  givesTryBack: false,
  isFault: false,
});

const HALTS = ['host-ended', 'out-of-memory'];

function ofCompute(error: ComputeError, tries: number): Ending {
  if (error.code === 'closed') return { ...ending('interrupted'), givesTryBack: true };
  if (HALTS.includes(error.code) && !error.wasAlone && tries < MAX_TRIES) {
    return { ...ending('interrupted'), runsAlone: true };
  }
  return { ...ending('failed', error.code, error.message), isFault: error.code === 'unexpected' };
}

/**
 * How a job ends that did not end well.
 *
 * @param tries Starts so far, this one among them.
 * @param timeLimitMs The limit of its kind, for the message.
 */
export function endingOf(error: unknown, stopReason: StopReason | null, tries: number, timeLimitMs: number): Ending {
  if (error instanceof Cancelled) {
    if (stopReason === 'stopping') return { ...ending('interrupted'), givesTryBack: true };
    if (stopReason !== 'time-limit') return ending('cancelled');
    const limit = `${Math.round(timeLimitMs / 60_000)} min`;
    return ending('failed', 'time-limit', `The work took longer than the ${limit} it may take and was stopped.`);
  }
  if (error instanceof KernelError || error instanceof AppError) return ending('failed', error.code, error.message);
  if (error instanceof ComputeError) return ofCompute(error, tries);
  const message = 'The work met a fault of ours; the service has logged it.';
  return { ...ending('failed', 'unexpected', message), isFault: true };
}
