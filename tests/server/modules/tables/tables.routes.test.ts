import { beforeAll, afterAll, describe, expect, it } from 'vitest';
import { CHUNK_ROWS, openColumnStore, QUALIFIER } from '#server/db/column-store.ts';
import { testClient, type TestClient } from '#tests/support/test-client.ts';

const N_ROWS = CHUNK_ROWS + 10;
let client: TestClient;
let live: number;
let pending: number;
const values = Float64Array.from({ length: N_ROWS }, (_, row) => row / 8);
const flags = Uint8Array.from({ length: N_ROWS }, (_, row) => row % 3);
const samples = Array.from({ length: N_ROWS }, (_, row) => `S${row} "é"`);

beforeAll(async () => {
  client = await testClient();
  const store = openColumnStore(client.env.paths.database, { readonly: false });
  const make = (): number => store.createTable({ depositId: client.depositId, nRows: N_ROWS, purpose: 'assays', jobId: null });
  [live, pending] = [make(), make()];
  for (const tableId of [live, pending]) store.writeAssay(tableId, { name: 'Cu', unit: 'ppm', meta: { method: 'four-acid' } }, values, flags);
  store.writeText(live, { name: 'sample id / field' }, samples);
  store.writeCategory(live, { name: 'lithology' }, values.map((value) => value % 2 ? NaN : 0), ['granite']);
  store.publish(live);
  store.close();
});
afterAll(() => client.close());

const address = (tableId: number, column?: string, depositId = client.depositId): string =>
  `/api/deposits/${depositId}/tables/${tableId}${column === undefined ? '' : `/columns/${encodeURIComponent(column)}`}`;

async function bytes(path: string) {
  const res = await client.as('viewer').get(path).buffer(true).parse((stream, done) => {
    const pieces: Buffer[] = [];
    stream.on('data', (piece: Buffer) => pieces.push(piece));
    stream.on('end', () => done(null, Buffer.concat(pieces)));
  });
  return { status: res.status, headers: res.headers, body: res.body as Buffer };
}

describe('a table', () => {
  it('is described to any member', async () => {
    const res = await client.as('viewer').get(address(live));
    expect(res.status).toBe(200);
    expect(res.body).toEqual({
      id: live, nRows: N_ROWS, purpose: 'assays',
      columns: [
        { name: 'Cu', kind: 'assay', unit: 'ppm', dictionary: null, meta: { method: 'four-acid' } },
        { name: 'sample id / field', kind: 'text', unit: null, dictionary: null, meta: null },
        { name: 'lithology', kind: 'category', unit: null, dictionary: ['granite'], meta: null },
      ],
    });
  });

  it.each([
    ['a pending table', () => address(pending), 'viewer'],
    ['a table that never was', () => address(9_999), 'viewer'],
    ['a table of another deposit', () => address(live, undefined, client.otherDepositId), 'lead-of-b'],
    ['a column of a pending table', () => address(pending, 'Cu'), 'viewer'],
    ['a column of another deposit', () => address(live, 'Cu', client.otherDepositId), 'lead-of-b'],
    ['a column of a table that never was', () => address(9_999, 'Cu'), 'viewer'],
  ] as const)('AZ-02 %s is no table', async (_name, path, who) => {
    const res = await client.as(who).get(path());
    expect([res.status, res.body.code, res.body.detail]).toEqual([404, 'no-such-table', 'There is no such table here.']);
  });

  it.each([[401, null], [404, 'outsider']] as const)('answers %i to %s', async (status, who) => {
    for (const path of [address(live), address(live, 'Cu')]) expect((await client.as(who).get(path)).status).toBe(status);
  });
});

describe('a column', () => {
  it('comes as little-endian float64 that may be kept for ever', async () => {
    const { status, headers, body } = await bytes(address(live, 'Cu'));
    expect(status).toBe(200);
    expect(headers).toMatchObject({
      'content-type': 'application/octet-stream', 'x-dtype': 'float64', 'x-length': String(N_ROWS),
      'cache-control': 'private, immutable, max-age=31536000',
    });
    expect(body.equals(Buffer.from(values.buffer))).toBe(true);
    expect(body.readDoubleLE(8 * (CHUNK_ROWS + 1))).toBe((CHUNK_ROWS + 1) / 8);
  });

  it('comes in part, across a chunk’s edge', async () => {
    const [from, to] = [CHUNK_ROWS - 3, CHUNK_ROWS + 4];
    const part = await bytes(`${address(live, 'Cu')}?from=${from}&to=${to}`);
    expect(part.body.equals(Buffer.from(values.slice(from, to).buffer))).toBe(true);
    expect(part.headers['x-length']).toBe('7');
    const marks = await bytes(`${address(live, 'Cu')}?part=qualifiers&from=${from}`);
    expect(marks.headers['x-dtype']).toBe('uint8');
    expect(marks.body.equals(Buffer.from(flags.slice(from)))).toBe(true);
    expect(marks.body[0]).toBe([QUALIFIER.measured, QUALIFIER.below, QUALIFIER.above][from % 3]);
  });

  it('of text comes as a JSON array', async () => {
    const res = await client.as('viewer').get(`${address(live, 'sample id / field')}?from=2`);
    expect(res.headers).toMatchObject({ 'content-type': 'application/json; charset=utf-8', 'x-length': String(N_ROWS - 2) });
    expect(JSON.stringify(res.body) === JSON.stringify(samples.slice(2))).toBe(true);
  });

  it('of categories comes as codes, NaN for none', async () => {
    const { body } = await bytes(`${address(live, 'lithology')}?to=2`);
    expect([body.readDoubleLE(0), body.readDoubleLE(8)]).toEqual([0, NaN]);
  });

  it.each([
    [404, 'no-such-column', 'Zn', ''],
    [400, 'range', 'Cu', `?to=${N_ROWS + 1}`],
    [400, 'range', 'Cu', '?from=5&to=4'],
    [400, 'no-qualifiers', 'lithology', '?part=qualifiers'],
    [400, 'no-qualifiers', 'sample id / field', '?part=qualifiers'],
    [400, 'invalid', 'Cu', '?from=-1'],
    [400, 'invalid', 'Cu', '?part=all'],
    [400, 'invalid', 'Cu', '?stride=2'],
  ])('answers %i %s for %s%s', async (status, code, column, query) => {
    const res = await client.as('viewer').get(address(live, column) + query);
    expect([res.status, res.body.code]).toEqual([status, code]);
    expect(res.headers['cache-control']).not.toMatch(/immutable/);
  });
});
