import { describe, expect, it, vi } from 'vitest';
import { createUploadQueue, type SendFile } from '#src/features/intake/upload-queue.ts';

const file = (name: string) => new File(['a,b\n1,2\n'], name);
const settle = () => new Promise((resolve) => setTimeout(resolve, 0));

/** A server that answers each file when told to. */
function slowServer() {
  const asked: { name: string; answer: (value: Awaited<ReturnType<SendFile>>) => void; fail: (error: Error) => void; onProgress: (sent: number, total: number) => void }[] = [];
  const send: SendFile = (_deposit, sent, { signal, onProgress }) =>
    new Promise((resolve, reject) => {
      asked.push({ name: sent.name, answer: resolve, fail: reject, onProgress });
      signal.addEventListener('abort', () => reject(new DOMException('Cancelled', 'AbortError')));
    });
  return { asked, send };
}

const states = (queue: ReturnType<typeof createUploadQueue>) => queue.get().map(({ state }) => state);

describe('files on their way', () => {
  it('go one after the other and tell how far they are', async () => {
    const { asked, send } = slowServer();
    const queue = createUploadQueue(send);
    const onKept = vi.fn();
    queue.add(1, [file('a.csv'), file('b.csv')], onKept);
    expect(states(queue)).toEqual(['sending', 'waiting']);
    asked[0]?.onProgress(4, 8);
    expect(queue.get()[0]).toMatchObject({ state: 'sending', sentBytes: 4 });
    asked[0]?.onProgress(8, 8);
    expect(states(queue)).toEqual(['reading', 'waiting']);
    asked[0]?.answer({ uploads: [{ id: 7 }], refused: [] });
    await settle();
    expect(queue.get()[0]).toMatchObject({ state: 'kept', uploadId: 7 });
    expect(onKept).toHaveBeenCalledOnce();
    expect(asked.map(({ name }) => name)).toEqual(['a.csv', 'b.csv']);
  });

  it('a refusal keeps its reason and lets the next one go', async () => {
    const { asked, send } = slowServer();
    const queue = createUploadQueue(send);
    queue.add(1, [file('book.csv'), file('b.csv')], () => undefined);
    asked[0]?.answer({ uploads: [], refused: [{ fileName: 'book.csv', message: 'expected CSV text, found a workbook' }] });
    await settle();
    expect(queue.get()[0]).toMatchObject({ state: 'refused', message: 'expected CSV text, found a workbook' });
    expect(states(queue)).toEqual(['refused', 'sending']);
  });

  it('a cancelled file stops at once, a waiting one is never sent, and either can be sent again', async () => {
    const { asked, send } = slowServer();
    const queue = createUploadQueue(send);
    queue.add(1, [file('a.csv'), file('b.csv')], () => undefined);
    const [first, second] = queue.get();
    queue.cancel(second!.key);
    queue.cancel(first!.key);
    await settle();
    expect(states(queue)).toEqual(['cancelled', 'cancelled']);
    expect(asked).toHaveLength(1);
    queue.retry(second!.key, () => undefined);
    expect(states(queue)).toEqual(['cancelled', 'sending']);
    queue.clear(1);
    expect(states(queue)).toEqual(['sending']);
  });

  it('a lost connection is told and does not stop the others', async () => {
    const { asked, send } = slowServer();
    const queue = createUploadQueue(send);
    queue.add(1, [file('a.csv'), file('b.csv')], () => undefined);
    asked[0]?.fail(new Error('No answer from the server'));
    await settle();
    expect(queue.get()[0]).toMatchObject({ state: 'failed', message: 'No answer from the server' });
    expect(states(queue)[1]).toBe('sending');
  });
});
