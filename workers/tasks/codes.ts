import { createHash } from 'node:crypto';
import { mkdir, open, rename } from 'node:fs/promises';
import { join } from 'node:path';
import { CODE_COLUMNS, type CodeSet } from '#contract/codes.ts';
import { UNASSIGNED } from '#contract/domains.ts';
import { codeLines, type CodeRow } from '#workers/frame/code-lines.ts';
import { readCodeRows, type CodeRowsInput } from '#workers/frame/code-rows.ts';
import { defineTask } from '#workers/task.ts';

export interface CodesInput extends CodeRowsInput {
  /** Folder to keep the file in, named by its SHA-256; null: only tell the checksum. */
  codesDir: string | null;
}

export interface CodesOutput {
  sha256: string;
  sizeBytes: number;
  result: Pick<CodeSet, 'rows' | 'metres' | 'notes'> & { byCode: Omit<CodeSet['byCode'][number], 'slot'>[] };
}

/** Kept under its checksum; a file that is there already holds the same bytes. */
async function keepFile(folder: string, sha256: string, bytes: Buffer): Promise<void> {
  await mkdir(folder, { recursive: true });
  const draft = join(folder, `${sha256}.part`);
  const file = await open(draft, 'w');
  try {
    await file.writeFile(bytes);
    await file.sync();
  } finally {
    await file.close();
  }
  await rename(draft, join(folder, `${sha256}.csv`));
}

function totals(rows: readonly CodeRow[], names: ReadonlyMap<string, string>): CodesOutput['result']['byCode'] {
  const byCode = new Map([...names].map(([code, name]) => [code, { code, name, intervals: 0, metres: 0 }]));
  for (const { code, lengthM } of rows) {
    const entry = byCode.get(code);
    if (!entry) continue;
    entry.intervals += 1;
    entry.metres += lengthM;
  }
  return [...byCode.values()];
}

/** Gives every interval its one code and writes the file; the same input makes the same bytes. */
export default defineTask<CodesInput, CodesOutput>(async (input, { report, store }) => {
  report('read columns', 0);
  const rows = readCodeRows(store(), input);
  report('write codes', 0.5);
  const bytes = Buffer.from(`${CODE_COLUMNS.join(',')}\n${codeLines(rows, input.snapshotId)}`, 'utf8');
  const sha256 = createHash('sha256').update(bytes).digest('hex');
  if (input.codesDir !== null) await keepFile(input.codesDir, sha256, bytes);
  const names = new Map([...input.rules.map(({ code, name }): [string, string] => [code, name]), [UNASSIGNED, 'without a domain']]);
  const byCode = totals(rows, names);
  const metres = rows.reduce((sum, { lengthM }) => sum + lengthM, 0);
  const notes = input.zoneTableId === null ? ['No deleterious zones were flagged: that column is empty.'] : [];
  return { sha256, sizeBytes: bytes.length, result: { rows: rows.length, metres, byCode, notes } };
});
