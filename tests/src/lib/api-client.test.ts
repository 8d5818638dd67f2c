import * as z from 'zod';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { DepositParams, PageQuery } from '#contract/common.ts';
import { endpoint } from '#contract/endpoint.ts';
import { ApiProblem } from '#src/lib/api-problem.ts';
import { call, endpointUrl } from '#src/lib/api-client.ts';

const access = { kind: 'signed-in' } as const;
const common = { tag: 't', access, summary: 's' };
const readThings = endpoint({
  id: 'readThings',
  method: 'get',
  path: '/deposits/:depositId/things',
  ...common,
  params: DepositParams,
  query: PageQuery.extend({ text: z.string().optional() }),
  response: z.object({ n: z.number() }),
});
const changeThing = endpoint({
  id: 'changeThing',
  method: 'put',
  path: '/things',
  ...common,
  body: z.strictObject({ name: z.string() }),
  response: z.object({ n: z.number() }),
  ifMatch: true,
  idempotent: true,
});

const fetchMock = vi.fn<typeof fetch>();
beforeEach(() => vi.stubGlobal('fetch', fetchMock));
afterEach(() => {
  vi.unstubAllGlobals();
  fetchMock.mockReset();
});

const answer = (body: unknown, status = 200) => new Response(JSON.stringify(body), { status });
const thrownBy = async (work: Promise<unknown>): Promise<ApiProblem> => {
  const error: unknown = await work.then(
    () => null,
    (reason: unknown) => reason,
  );
  if (!(error instanceof ApiProblem))
    throw new Error(`expected an ApiProblem, found ${String(error)}`);
  return error;
};

describe('call', () => {
  it('fills parameters and query into the address', async () => {
    fetchMock.mockResolvedValue(answer({ n: 4 }));
    const got = await call(readThings, {
      params: { depositId: 7 },
      query: { page: 2, text: 'a&b' },
    });
    expect(got).toEqual({ n: 4 });
    expect(fetchMock.mock.calls[0]?.[0]).toBe('/api/deposits/7/things?page=2&text=a%26b');
  });

  it('escapes parameters and leaves absent query fields out', () => {
    expect(
      endpointUrl(
        { path: '/holes/:hole' },
        { params: { hole: 'A/1 b' }, query: { text: undefined } },
      ),
    ).toBe('/api/holes/A%2F1%20b');
  });

  it('CO-01, CO-02 sends the version, and a key of its own for each call', async () => {
    fetchMock.mockImplementation(() => Promise.resolve(answer({ n: 1 })));
    await call(changeThing, { body: { name: 'x' }, ifMatch: 3 });
    await call(changeThing, { body: { name: 'x' }, ifMatch: 3 });
    await call(changeThing, { body: { name: 'x' }, ifMatch: 3, idempotencyKey: 'mine' });
    const headers = fetchMock.mock.calls.map(([, init]) => new Headers(init?.headers));
    expect(headers[0]?.get('If-Match')).toBe('"3"');
    expect(headers[0]?.get('Content-Type')).toBe('application/json');
    expect(headers[0]?.get('Idempotency-Key')).toMatch(/^[0-9a-f]{32}$/);
    expect(headers[1]?.get('Idempotency-Key')).not.toBe(headers[0]?.get('Idempotency-Key'));
    expect(headers[2]?.get('Idempotency-Key')).toBe('mine');
  });

  it('throws what the server said', async () => {
    const problem = {
      type: '/problems/stale',
      title: 'Changed meanwhile',
      status: 412,
      code: 'stale',
      detail: 'Expected version 4, found 3',
      requestId: 'r',
      currentVersion: 4,
    };
    fetchMock.mockResolvedValue(answer(problem, 412));
    const error = await thrownBy(call(changeThing, { body: { name: 'x' }, ifMatch: 3 }));
    expect([error.status, error.code, error.message]).toEqual([
      412,
      'stale',
      'Expected version 4, found 3',
    ]);
  });

  it('says so when an error has no description', async () => {
    fetchMock.mockResolvedValue(new Response('<html>', { status: 502 }));
    const error = await thrownBy(call(readThings, { params: { depositId: 1 } }));
    expect([error.status, error.code]).toEqual([502, 'unexpected-answer']);
  });

  it('says so when there is no network', async () => {
    fetchMock.mockRejectedValue(new TypeError('failed'));
    expect((await thrownBy(call(readThings, { params: { depositId: 1 } }))).code).toBe(
      'no-network',
    );
  });

  it('refuses an answer out of contract and names the place', async () => {
    fetchMock.mockResolvedValue(answer({ n: 'four' }));
    const error = await thrownBy(call(readThings, { params: { depositId: 1 } }));
    expect(error.code).toBe('unexpected-answer');
    expect(error.message).toContain('at n');
  });

  it('lets a cancelled call be cancelled', async () => {
    fetchMock.mockRejectedValue(new DOMException('stopped', 'AbortError'));
    await expect(call(readThings, { params: { depositId: 1 } })).rejects.toMatchObject({
      name: 'AbortError',
    });
  });
});
