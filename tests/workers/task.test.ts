import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { KernelError } from '#kernels/kernel-error.ts';
import { Cancelled, type TaskCall } from '#workers/task-types.ts';
import { defineTask } from '#workers/task.ts';
import { columnDatabase, type ColumnDatabase } from '../server/db/column-database.ts';

let database: ColumnDatabase;
beforeAll(async () => {
  database = await columnDatabase();
});
afterAll(() => database.remove());

function callOf<In>(input: In): TaskCall<In> & { cancel: () => void } {
  const cancelFlag = new SharedArrayBuffer(4);
  return {
    runId: 1, input, cancelFlag, databaseFile: database.file, dataDir: database.folder,
    cancel: () => void Atomics.store(new Int32Array(cancelFlag), 0, 1),
  };
}

describe('defineTask', () => {
  it('answers with the output, awaited if need be', async () => {
    const twice = defineTask<number, number>((n) => 2 * n);
    const later = defineTask<number, number>((n) => Promise.resolve(3 * n));
    expect(await twice(callOf(4))).toEqual({ ok: true, output: 8 });
    expect(await later(callOf(4))).toEqual({ ok: true, output: 12 });
  });

  it('gives back as data a refusal, a fault and a full disk', async () => {
    const refuse = defineTask<null, never>(() => {
      throw new KernelError('shape', 'expected 3 values, found 2', { expected: 3, found: 2 });
    });
    const failure = { kind: 'kernel', code: 'shape', message: 'expected 3 values, found 2', detail: { expected: 3, found: 2 } };
    expect(await refuse(callOf(null))).toEqual({ ok: false, failure });
    const fault = defineTask<null, never>(() => {
      throw new TypeError('ours');
    });
    const unexpected = { kind: 'compute', code: 'unexpected', cause: expect.stringContaining('TypeError: ours') };
    expect(await fault(callOf(null))).toMatchObject({ ok: false, failure: unexpected });
    const full = defineTask<null, never>(() => {
      throw Object.assign(new Error('database or disk is full'), { code: 'SQLITE_FULL' });
    });
    expect(await full(callOf(null))).toMatchObject({ ok: false, failure: { kind: 'compute', code: 'disk-full' } });
  });

  it('keeps the inside of a fault of the database for the log', async () => {
    const broken = defineTask<null, unknown>((_input, { store }) => store().db.prepare('SELECT 1 FROM nowhere').get());
    expect(await broken(callOf(null))).toMatchObject({ ok: false, failure: { cause: expect.stringContaining('no such table: nowhere') } });
  });

  it('stops at the first report after the flag was set', async () => {
    const reached: number[] = [];
    const call = callOf(null);
    const task = defineTask<null, string>((_input, { report }) => {
      for (let step = 0; step < 10; step++) {
        report('step', step / 10);
        reached.push(step);
        if (step === 3) call.cancel();
      }
      return 'an answer';
    });
    expect(await task(call)).toEqual({ ok: false, failure: { kind: 'cancelled' } });
    expect(reached).toEqual([0, 1, 2, 3]);
  });

  it('a task that catches everything cannot hide a cancellation from its next report', async () => {
    const call = callOf(null);
    call.cancel();
    let caught: unknown = null;
    const task = defineTask<null, string>((_input, { report }) => {
      try {
        report('first', 0);
      } catch (error) {
        caught = error;
      }
      report('second', 0.5);
      return 'an answer';
    });
    expect(await task(call)).toEqual({ ok: false, failure: { kind: 'cancelled' } });
    expect(caught).toBeInstanceOf(Cancelled);
  });

  it('opens one store at the first asking and closes it in the end, also after a refusal', async () => {
    const stores: { open: boolean }[] = [];
    const task = defineTask<boolean, boolean>((fails, { store }) => {
      stores.push(store().db);
      expect(store()).toBe(store());
      if (fails) throw new KernelError('shape', 'refused');
      return store().db.open;
    });
    expect(await task(callOf(false))).toEqual({ ok: true, output: true });
    expect((await task(callOf(true))).ok).toBe(false);
    expect(stores.map(({ open }) => open)).toEqual([false, false]);
  });
});
