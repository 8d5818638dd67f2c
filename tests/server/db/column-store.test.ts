import fc from 'fast-check';
import { afterEach, beforeEach, describe, expect, it, test } from 'vitest';
import { CHUNK_ROWS, QUALIFIER, openColumnStore, type ColumnStore } from '#server/db/column-store.ts';
import { bytesOf } from '#server/db/column-store-format.ts';
import { inShortTransactions } from '#server/db/column-store-write.ts';
import { openMappedStore } from '#workers/store-access.ts';
import { columnDatabase, type ColumnDatabase } from './column-database.ts';

let database: ColumnDatabase;
let store: ColumnStore;

beforeEach(async () => {
  database = await columnDatabase();
  store = database.store;
});
afterEach(() => database.remove());

const tableOf = (nRows: number, jobId: number | null = null): number =>
  store.createTable({ depositId: 1, nRows, purpose: 'assays', jobId });

const codeOf = (work: () => unknown): unknown => {
  try {
    work();
  } catch (error) {
    return Reflect.get(Object(error), 'code');
  }
  return 'nothing was thrown';
};

/** Long arrays are compared as bytes: a matcher would take minutes. */
const sameBytes = (a: Float64Array | Uint8Array, b: Float64Array | Uint8Array): boolean =>
  Buffer.from(bytesOf(a)).equals(bytesOf(b));

const leftover = (): number[] =>
  ['column_chunks', 'columns', 'column_tables'].map((name) =>
    Number(store.db.prepare(`SELECT count(*) FROM ${name}`).pluck().get()),
  );

describe('round trip', () => {
  it('keeps every kind of column, NaN and negative zero among the numbers', () => {
    const tableId = tableOf(4);
    const values = Float64Array.of(1.5, -0, NaN, 1e-308);
    store.writeNumbers(tableId, { name: 'depth from', unit: 'm' }, values);
    const flags = Uint8Array.of(QUALIFIER.measured, QUALIFIER.below, QUALIFIER.missing, QUALIFIER.above);
    const copper = Float64Array.of(120, 0.5, NaN, 10_000);
    store.writeAssay(tableId, { name: 'Cu', unit: 'ppm', meta: { method: 'four-acid' } }, copper, flags);
    store.writeCategory(tableId, { name: 'lithology' }, Float64Array.of(1, 0, NaN, 1), ['granite', 'schist']);
    store.writeText(tableId, { name: 'sample' }, ['A1', '', 'é"\\\n', '🪨']);
    store.publish(tableId);

    expect(store.readNumbers(tableId, 'depth from')).toStrictEqual(values);
    expect(Object.is(store.readNumbers(tableId, 'depth from')[1], -0)).toBe(true);
    expect([...store.readNumbers(tableId, 'Cu')]).toEqual([120, 0.5, NaN, 10_000]);
    expect([...store.readQualifiers(tableId, 'Cu')]).toEqual([...flags]);
    const { codes, dictionary } = store.readCategory(tableId, 'lithology');
    expect([[...codes], dictionary]).toEqual([[1, 0, NaN, 1], ['granite', 'schist']]);
    expect(store.readText(tableId, 'sample')).toEqual(['A1', '', 'é"\\\n', '🪨']);
    expect(store.describe(tableId)).toEqual({
      id: tableId, depositId: 1, nRows: 4, purpose: 'assays', state: 'live',
      columns: [
        { name: 'depth from', kind: 'number', unit: 'm', dictionary: null, meta: null },
        { name: 'Cu', kind: 'assay', unit: 'ppm', dictionary: null, meta: { method: 'four-acid' } },
        { name: 'lithology', kind: 'category', unit: null, dictionary: ['granite', 'schist'], meta: null },
        { name: 'sample', kind: 'text', unit: null, dictionary: null, meta: null },
      ],
    });
  });

  it('passes whole columns in shared memory', () => {
    const tableId = tableOf(3);
    store.writeNumbers(tableId, { name: 'x' }, Float64Array.of(1, 2, 3));
    expect(store.readNumbers(tableId, 'x').buffer).toBeInstanceOf(SharedArrayBuffer);
    expect(store.readMany(tableId, ['x', 'x']).map((column) => [...column])).toEqual([[1, 2, 3], [1, 2, 3]]);
  });

  it('keeps an empty table', () => {
    const tableId = tableOf(0);
    store.writeNumbers(tableId, { name: 'x' }, new Float64Array(0));
    store.writeText(tableId, { name: 'note' }, []);
    expect([store.readNumbers(tableId, 'x').length, store.readText(tableId, 'note').length]).toEqual([0, 0]);
    expect(Buffer.concat([...store.streamTextJson(tableId, 'note')]).toString()).toBe('[]');
  });
});

describe('ranges over three chunks', () => {
  const nRows = 2 * CHUNK_ROWS + 1_000;
  const values = Float64Array.from({ length: nRows }, (_, row) => row * 0.25);
  const flags = Uint8Array.from({ length: nRows }, (_, row) => row % 3);
  const texts = Array.from({ length: nRows }, (_, row) => `S${row}`);
  let tableId: number;

  beforeEach(() => {
    tableId = tableOf(nRows);
    store.writeAssay(tableId, { name: 'Cu', unit: 'ppm' }, values, flags);
    store.writeText(tableId, { name: 'sample' }, texts);
  });

  it('answers any range as the same part of the array', () => {
    const row = fc.oneof(fc.nat(nRows), fc.constantFrom(0, CHUNK_ROWS - 1, CHUNK_ROWS, CHUNK_ROWS + 1, 2 * CHUNK_ROWS, nRows));
    const sameAsSlice = (a: number, b: number): void => {
      const range = { start: Math.min(a, b), end: Math.max(a, b) };
      const { start, end } = range;
      const json = Buffer.concat([...store.streamTextJson(tableId, 'sample', range)]).toString();
      expect(json === JSON.stringify(texts.slice(start, end))).toBe(true);
      expect(store.readText(tableId, 'sample', range).join() === texts.slice(start, end).join()).toBe(true);
      const part = values.subarray(start, end);
      expect(sameBytes(store.readNumbers(tableId, 'Cu', range), part)).toBe(true);
      expect(sameBytes(Buffer.concat([...store.streamBytes(tableId, 'Cu', 'values', range)]), part)).toBe(true);
      expect(sameBytes(store.readQualifiers(tableId, 'Cu', range), flags.subarray(start, end))).toBe(true);
    };
    fc.assert(fc.property(row, row, sameAsSlice), { numRuns: 25 });
  });

  it.each([
    [-1, 3],
    [4, 3],
    [0, nRows + 1],
    [0.5, 3],
    [0, NaN],
  ])('refuses rows %d to %d', (start, end) => {
    expect(codeOf(() => store.readNumbers(tableId, 'Cu', { start, end }))).toBe('range');
  });

  it('says so when a chunk is gone', () => {
    store.db.exec('DELETE FROM column_chunks WHERE chunk_no = 1');
    expect(codeOf(() => store.readNumbers(tableId, 'Cu'))).toBe('incomplete');
  });
});

test('gives back any assays and qualifiers (property)', () => {
  const number = fc.double({ noNaN: true, noDefaultInfinity: true });
  const cell = fc.oneof(
    fc.tuple(number, fc.constantFrom(QUALIFIER.measured, QUALIFIER.below, QUALIFIER.above)),
    fc.tuple(fc.constant(NaN), fc.constantFrom(QUALIFIER.missing, QUALIFIER.notAnalysed)),
  );
  const roundTrip = (cells: [number, number][], texts: string[]): void => {
    const values = Float64Array.from(cells, ([value]) => value);
    const flags = Uint8Array.from(cells, ([, flag]) => flag);
    const tableId = tableOf(cells.length);
    store.writeAssay(tableId, { name: 'Au', unit: 'ppm' }, values, flags);
    expect(sameBytes(store.readNumbers(tableId, 'Au'), values)).toBe(true);
    expect([...store.readQualifiers(tableId, 'Au')]).toEqual([...flags]);
    const textTableId = tableOf(texts.length);
    store.writeText(textTableId, { name: 'note' }, texts);
    expect(store.readText(textTableId, 'note')).toEqual(texts);
  };
  const text = fc.array(fc.string({ unit: 'binary' }));
  fc.assert(fc.property(fc.array(cell), text, roundTrip), { numRuns: 100 });
});

describe('faults', () => {
  const one = Float64Array.of(1);
  it.each([
    ['no-table', () => store.readNumbers(99, 'x')],
    ['no-column', () => store.readNumbers(tableOf(1), 'x')],
    ['shape', () => store.writeNumbers(tableOf(2), { name: 'x' }, one)],
    ['shape', () => store.writeText(tableOf(2), { name: 'x' }, ['a'])],
    ['shape', () => store.writeAssay(tableOf(1), { name: 'x', unit: 'ppm' }, one, new Uint8Array(2))],
    ['bad-qualifier', () => store.writeAssay(tableOf(1), { name: 'x', unit: 'ppm' }, Float64Array.of(NaN), Uint8Array.of(QUALIFIER.below))],
    ['bad-qualifier', () => store.writeAssay(tableOf(1), { name: 'x', unit: 'ppm' }, one, Uint8Array.of(QUALIFIER.missing))],
    ['bad-qualifier', () => store.writeAssay(tableOf(1), { name: 'x', unit: 'ppm' }, Float64Array.of(NaN), Uint8Array.of(5))],
    ['bad-code', () => store.writeCategory(tableOf(1), { name: 'x' }, one, ['granite'])],
    ['bad-code', () => store.writeCategory(tableOf(1), { name: 'x' }, Float64Array.of(0.5), ['granite'])],
  ])('%s', (code, work) => {
    expect(codeOf(work)).toBe(code);
  });

  it('refuses a second column of one name, the wrong kind, and any change of a published table', () => {
    const tableId = tableOf(1);
    store.writeNumbers(tableId, { name: 'x' }, one);
    expect(codeOf(() => store.writeNumbers(tableId, { name: 'x' }, one))).toBe('duplicate-column');
    expect(codeOf(() => store.readText(tableId, 'x'))).toBe('bad-kind');
    expect(codeOf(() => store.readQualifiers(tableId, 'x'))).toBe('bad-kind');
    store.publish(tableId);
    expect(codeOf(() => store.writeNumbers(tableId, { name: 'y' }, one))).toBe('live-table');
  });

  it('leaves nothing of a refused column', () => {
    const tableId = tableOf(1);
    codeOf(() => store.writeAssay(tableId, { name: 'x', unit: 'ppm' }, one, Uint8Array.of(4)));
    expect(store.describe(tableId).columns).toEqual([]);
  });
});

function insertJob(id: number, state: string): void {
  const insert = `INSERT INTO jobs (id, deposit_id, kind, title, params, state, started_by, created_at)
    VALUES (?, 1, 'grouping', 'Group', '{}', ?, 1, '2026-01-01T00:00:00.000Z')`;
  store.db.prepare(insert).run(id, state);
}
const tablesLeft = (): number[] => store.db.prepare<[], number>('SELECT id FROM column_tables ORDER BY id').pluck().all();

describe('dropping', () => {
  it('leaves no row of a dropped table and all of the others', () => {
    const kept = tableOf(1);
    store.writeNumbers(kept, { name: 'x' }, Float64Array.of(7));
    const before = leftover();
    const dropped = tableOf(CHUNK_ROWS * 9 + 1);
    store.writeNumbers(dropped, { name: 'x' }, new Float64Array(CHUNK_ROWS * 9 + 1));
    store.publish(dropped);
    store.dropTable(dropped);
    expect(leftover()).toEqual(before);
    expect([...store.readNumbers(kept, 'x')]).toEqual([7]);
  });

  it('drops what a job began and keeps what it published', () => {
    for (const jobId of [5, 6]) insertJob(jobId, 'running');
    const [pending, live, other] = [tableOf(1, 5), tableOf(1, 5), tableOf(1, 6)];
    store.publish(live);
    store.dropPending(5);
    expect([pending, tablesLeft()]).toEqual([1, [live, other]]);
  });

  it('drops leftovers: of jobs that have ended, and old ones without a job', () => {
    insertJob(5, 'failed');
    insertJob(6, 'running');
    insertJob(7, 'interrupted');
    const [, running, interrupted, , fresh] = [tableOf(1, 5), tableOf(1, 6), tableOf(1, 7), tableOf(1), tableOf(1)];
    store.db.exec(`UPDATE column_tables SET created_at = '2026-01-01T00:00:00.000Z' WHERE id = ${Number(interrupted) + 1}`);
    store.dropLeftovers();
    expect(tablesLeft()).toEqual([running, interrupted, fresh]);
  });
});

test('JO-05 work is cut into transactions of some 15 ms, whatever it takes in all', () => {
  const watcher = openColumnStore(database.file, { readonly: true });
  const commitsSeen = new Set<unknown>();
  let stepsLeft = 20;
  inShortTransactions(store.db, () => {
    commitsSeen.add(watcher.db.pragma('data_version', { simple: true }));
    store.db.exec('INSERT INTO users DEFAULT VALUES');
    const endsAt = performance.now() + 6;
    while (performance.now() < endsAt);
    stepsLeft -= 1;
    return stepsLeft > 0;
  });
  watcher.close();
  expect(commitsSeen.size).toBeGreaterThanOrEqual(5);
  expect(store.db.prepare('SELECT count(*) FROM users').pluck().get()).toBe(21);
});

describe('DU-01 every connection maker sets the pragmas', () => {
  const pragmasOf = (opened: ColumnStore) =>
    ['journal_mode', 'synchronous', 'foreign_keys', 'trusted_schema', 'busy_timeout'].map((name) =>
      opened.db.pragma(name, { simple: true }),
    );
  it.each([
    ['read-write', 5_000, (file: string) => openColumnStore(file, { readonly: false })],
    ['read-only', 250, (file: string) => openColumnStore(file, { readonly: true })],
    ['mapped', 5_000, openMappedStore],
  ] as const)('%s', (_name, busyTimeoutMs, open) => {
    const opened = open(database.file);
    const found = pragmasOf(opened);
    opened.close();
    expect(found).toEqual(['wal', 2, 1, 0, busyTimeoutMs]);
  });
});
