import { queryOptions } from '@tanstack/react-query';
import * as z from 'zod';
import { getTable, readColumn } from '#contract/tables.ts';
import { call, callRaw } from './api-client.ts';
import { unexpectedAnswer } from './api-problem.ts';

/** Tables of columns never change once written: what is read once is kept while the page is open. */
const FOREVER = { staleTime: Infinity, gcTime: 30 * 60_000, structuralSharing: false } as const;

const NUMBERS = {
  float64: Float64Array,
  float32: Float32Array,
  int32: Int32Array,
  uint8: Uint8Array,
} as const;

function numbersOf(
  bytes: ArrayBuffer,
  dtype: string,
  where: string,
): Float64Array | Float32Array | Int32Array | Uint8Array {
  for (const [name, Numbers] of Object.entries(NUMBERS)) {
    if (name === dtype && bytes.byteLength % Numbers.BYTES_PER_ELEMENT === 0)
      return new Numbers(bytes);
  }
  throw unexpectedAnswer(200, where, `${bytes.byteLength} bytes of type ${dtype}`);
}

const LITTLE_ENDIAN = new Uint8Array(new Uint32Array([1]).buffer)[0] === 1;

/**
 * Reads the numbers of a binary answer (`X-Dtype` names their type; bytes are little-endian).
 *
 * @throws {ApiProblem} `unexpected-answer` for an unknown type or a broken length.
 */
export async function readNumbers(response: Response, where: string): Promise<Float64Array> {
  const bytes = await response.arrayBuffer();
  const dtype = response.headers.get('X-Dtype') ?? 'none';
  if (!LITTLE_ENDIAN)
    throw unexpectedAnswer(200, where, 'a big-endian browser, which cannot read it');
  const numbers = numbersOf(bytes, dtype, where);
  return numbers instanceof Float64Array ? numbers : Float64Array.from(numbers);
}

export const tableQuery = (depositId: number, tableId: number) =>
  queryOptions({
    queryKey: ['tables', depositId, tableId],
    queryFn: ({ signal }) => call(getTable, { params: { depositId, tableId } }, signal),
    ...FOREVER,
  });

/** Values of one column: numbers, assays in ppm, or category codes into its dictionary; NaN = none. */
export const columnQuery = (depositId: number, tableId: number, column: string) =>
  queryOptions({
    queryKey: ['tables', depositId, tableId, 'values', column],
    queryFn: async ({ signal }) => {
      const params = { depositId, tableId, column };
      return readNumbers(await callRaw(readColumn, { params }, signal), `column ${column}`);
    },
    ...FOREVER,
  });

/** What each number of an assay column means: the codes of `QUALIFIER`. */
export const qualifiersQuery = (depositId: number, tableId: number, column: string) =>
  queryOptions({
    queryKey: ['tables', depositId, tableId, 'qualifiers', column],
    queryFn: async ({ signal }) => {
      const given = {
        params: { depositId, tableId, column },
        query: { part: 'qualifiers' },
      } as const;
      const response = await callRaw(readColumn, given, signal);
      return Uint8Array.from(await readNumbers(response, `qualifiers of ${column}`));
    },
    ...FOREVER,
  });

const Texts = z.array(z.string().nullable());

/** A text column (hole names, sample numbers). */
export const textColumnQuery = (depositId: number, tableId: number, column: string) =>
  queryOptions({
    queryKey: ['tables', depositId, tableId, 'texts', column],
    queryFn: async ({ signal }) => {
      const params = { depositId, tableId, column };
      const response = await callRaw(readColumn, { params }, signal);
      const parsed = Texts.safeParse(await response.json().catch(() => null));
      if (!parsed.success) throw unexpectedAnswer(200, `column ${column}`, 'no list of texts');
      return parsed.data;
    },
    ...FOREVER,
  });

/** A category column with its words, ready for a legend. */
export interface Categories {
  codes: Float64Array;
  dictionary: readonly string[];
}

export const categoriesQuery = (depositId: number, tableId: number, column: string) =>
  queryOptions({
    queryKey: ['tables', depositId, tableId, 'categories', column],
    queryFn: async ({ client }): Promise<Categories> => {
      const [table, codes] = await Promise.all([
        client.ensureQueryData(tableQuery(depositId, tableId)),
        client.ensureQueryData(columnQuery(depositId, tableId, column)),
      ]);
      return {
        codes,
        dictionary: table.columns.find(({ name }) => name === column)?.dictionary ?? [],
      };
    },
    ...FOREVER,
  });
