import { createHash } from 'node:crypto';
import { parse } from 'csv-parse/sync';
import * as z from 'zod';
import { CODE_COLUMNS, downloadCodes } from '#contract/codes.ts';
import type { HttpClient } from './http-client.ts';

const Row = z.record(z.enum(CODE_COLUMNS), z.string());
export type CodesRow = z.infer<typeof Row>;

/** A codes file as downloaded: its rows, its checksum made here, and the checksums the server told. */
export async function readCodes(api: HttpClient, codeSetId: number) {
  const res = await api.send(downloadCodes, { params: { codeSetId } });
  const bytes = Buffer.from(await res.arrayBuffer());
  const hash = createHash('sha256').update(bytes).digest();
  return {
    status: res.status,
    bytes,
    sha256: hash.toString('hex'),
    digestHere: `sha-256=:${hash.toString('base64')}:`,
    told: res.headers.get('x-content-sha256'),
    digestTold: res.headers.get('repr-digest'),
    rows: z.array(Row).parse(parse(bytes.toString('utf8'), { columns: true })),
  };
}
