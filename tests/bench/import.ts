import { createReadStream, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { finished } from 'node:stream/promises';
import { parse } from 'csv-parse';
import { columnDatabase } from '#tests/server/db/column-database.ts';
import { seededRandom } from '#kernels/random.ts';
import { writeDraft } from '#workers/intake/draft-tables.ts';
import { inspectFile } from '#workers/intake/inspect.ts';
import { readTable } from '#workers/intake/read-table.ts';
import type { Bench } from './run.ts';

const N_ROWS = 100_000;
const ELEMENTS = 'Ag Al As Ba Be Bi Ca Cd Ce Co Cr Cs Cu Fe Ga Ge Hf In K La Li Mg Mn Mo Na Nb Ni P Pb Rb Re S Sb Sc Se Sn Sr Ta Te Th Ti Tl U V W Y Zn Zr'.split(' ');

/** An assay table of 51 columns: hole, from, to and 48 analytes, one value in twenty below detection. */
function writeTable(path: string): void {
  const random = seededRandom(5);
  const lines = [['hole', 'from', 'to', ...ELEMENTS.map((element) => `${element}_ppm`)].join(',')];
  for (let row = 0; row < N_ROWS; row++) {
    const cells = ELEMENTS.map(() => (random.uniform() < 0.05 ? '<0.5' : (100 * random.uniform()).toFixed(2)));
    lines.push([`H${String(Math.floor(row / 200)).padStart(4, '0')}`, row % 200, (row % 200) + 1, ...cells].join(','));
  }
  writeFileSync(path, lines.join('\n'));
}

/** Import of 100,000 × 51 with validation and writing; the peer only parses the same file to cells. Goal: at most three times as long. */
export async function importBench(): Promise<Bench> {
  const folder = mkdtempSync(join(tmpdir(), 'selvage-bench-'));
  const path = join(folder, 'assays.csv');
  writeTable(path);
  const { store, remove } = await columnDatabase();
  const { mapping } = await inspectFile(path, 'assays.csv', 1e9);
  return {
    workload: `import ${N_ROWS} × ${ELEMENTS.length + 3} CSV, checked and written (goal: ratio ≤ 3)`,
    peerName: 'bare csv-parse stream',
    ours: async () => {
      const { draft, order } = await readTable(store, { path, mapping, collarTableId: null, baseTableId: null }, () => undefined);
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
