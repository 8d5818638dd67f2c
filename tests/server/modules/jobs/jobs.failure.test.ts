import { describe, expect, it } from 'vitest';
import { KernelError } from '#kernels/kernel-error.ts';
import { AppError } from '#server/lib/errors.ts';
import { endingOf, type Ending } from '#server/modules/jobs/jobs.failure.ts';
import { Cancelled, ComputeError } from '#workers/client.ts';

const HOUR_MS = 3_600_000;
const halted = (wasAlone: boolean): ComputeError => new ComputeError('host-ended', 'The process ended.', wasAlone);

const plain: Omit<Ending, 'state' | 'error'> = { runsAlone: false, givesTryBack: false, isFault: false };

describe('how a job ends that did not end well', () => {
  it.each<[string, Ending, Parameters<typeof endingOf>]>([
    ['cancelled by a person', { ...plain, state: 'cancelled', error: null }, [new Cancelled(), 'cancelled', 1, HOUR_MS]],
    ['interrupted by a clean stop', { ...plain, state: 'interrupted', error: null, givesTryBack: true }, [new Cancelled(), 'stopping', 1, HOUR_MS]],
    ['interrupted by the host’s close', { ...plain, state: 'interrupted', error: null, givesTryBack: true }, [new ComputeError('closed', 'Stopped.', true), null, 1, HOUR_MS]],
    ['refused by a kernel', { ...plain, state: 'failed', error: { code: 'too-few-rows', message: 'expected 10 rows, found 3' } }, [new KernelError('too-few-rows', 'expected 10 rows, found 3'), null, 1, HOUR_MS]],
    ['refused by the server', { ...plain, state: 'failed', error: { code: 'no-such-upload', message: 'There is no such upload here.' } }, [new AppError(404, 'no-such-upload', 'There is no such upload here.'), null, 1, HOUR_MS]],
    ['the end of its process, alone', { ...plain, state: 'failed', error: { code: 'host-ended', message: 'The process ended.' } }, [halted(true), null, 1, HOUR_MS]],
    ['the end of its process, with others', { ...plain, state: 'interrupted', error: null, runsAlone: true }, [halted(false), null, 1, HOUR_MS]],
    ['the end of its process a second time', { ...plain, state: 'failed', error: { code: 'host-ended', message: 'The process ended.' } }, [halted(false), null, 2, HOUR_MS]],
    ['a fault of the task', { ...plain, state: 'failed', error: { code: 'unexpected', message: 'A fault.' }, isFault: true }, [new ComputeError('unexpected', 'A fault.', true), null, 1, HOUR_MS]],
  ])('%s', (_name, expected, given) => {
    expect(endingOf(...given)).toEqual(expected);
  });

  it('names the limit that was passed', () => {
    const { state, error } = endingOf(new Cancelled(), 'time-limit', 1, HOUR_MS);
    expect([state, error?.code, error?.message]).toEqual(['failed', 'time-limit', expect.stringContaining('60 min')]);
  });

  it('tells people nothing of a fault’s inside', () => {
    const { error, isFault } = endingOf(new TypeError('cannot read x of undefined'), null, 1, HOUR_MS);
    expect([error?.code, isFault]).toEqual(['unexpected', true]);
    expect(error?.message).not.toContain('undefined');
  });
});
