import { createReadStream, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { finished } from 'node:stream/promises';
import { parse } from 'csv-parse';
import { columnDatabase } from '#tests/server/db/column-database.ts';
import { writeDraft } from '#workers/intake/draft-tables.ts';
import { inspectFile } from '#workers/intake/inspect.ts';
import { readTable } from '#workers/intake/read-table.ts';
import { ASSAY_COLUMNS, ASSAY_ROWS, writeAssays } from './assay-file.ts';
import type { Bench } from './bench.ts';

/** Import of 100,000 × 51 with validation and writing; the peer only parses the same file to cells. Goal: at most three times as long. */
export async function importBench(): Promise<Bench> {
  const folder = mkdtempSync(join(tmpdir(), 'selvage-bench-'));
  const path = join(folder, 'assays.csv');
  writeAssays(path);
  const { store, remove } = await columnDatabase();
  const { mapping, encoding } = await inspectFile(path, 'assays.csv', 1e9);
  return {
    workload: `import ${ASSAY_ROWS} × ${ASSAY_COLUMNS} CSV, checked and written (goal: ratio ≤ 3)`,
    peerName: 'bare csv-parse stream',
    ours: async () => {
      const { draft, order } = await readTable(store, { path, encoding, mapping, collarTableId: null, baseTableId: null }, () => undefined);
      const tableId = store.createTable({ depositId: 1, nRows: order.length, purpose: 'bench', jobId: null });
      writeDraft(store, tableId, draft, order);
      store.dropTable(tableId);
    },
    peer: async () => {
      const parser = createReadStream(path).pipe(parse({ columns: false }));
      parser.resume();
      await finished(parser);
    },
    close: () => {
      remove();
      rmSync(folder, { recursive: true, force: true });
    },
  };
}
