import { getTable, readColumn } from '#contract/tables.ts';
import type { HttpClient } from './http-client.ts';

async function bytesOf(api: HttpClient, tableId: number, column: string): Promise<ArrayBuffer> {
  const res = await api.send(readColumn, { params: { tableId, column } });
  if (res.status !== 200) throw new Error(`column ${column}: ${res.status} ${await res.text()}`);
  return res.arrayBuffer();
}

export const readNumbers = async (api: HttpClient, tableId: number, column: string): Promise<Float64Array> =>
  new Float64Array(await bytesOf(api, tableId, column));

/** Texts of a category column; null where a row has none. */
export async function readCategory(api: HttpClient, tableId: number, column: string): Promise<(string | null)[]> {
  const { columns } = await api.call(getTable, { params: { tableId } });
  const dictionary = columns.find(({ name }) => name === column)?.dictionary ?? [];
  const codes = await readNumbers(api, tableId, column);
  return Array.from(codes, (code) => dictionary[code] ?? null);
}
