import { CHUNK_ROWS } from '#server/db/column-store.ts';
import { columnDatabase } from '#tests/server/db/column-database.ts';
import { openMappedStore } from '#workers/store-access.ts';
import type { Bench } from './bench.ts';

const N_ROWS = 1_000_000;
const N_COLUMNS = 48;
const NAMES = Array.from({ length: N_COLUMNS }, (_, column) => `element ${column}`);

/**
 * Loads 48 assays of a million intervals. The peer is the least that gives the same numbers: the
 * bare driver fetching each column's BLOBs and joining them, unchecked and not in shared memory.
 */
export async function columnStoreBench(): Promise<Bench> {
  const { file, store, remove } = await columnDatabase();
  const values = Float64Array.from({ length: N_ROWS }, (_, row) => row % 977);
  const qualifiers = new Uint8Array(N_ROWS);
  const tableId = store.createTable({ depositId: 1, nRows: N_ROWS, purpose: 'assays', jobId: null });
  for (const name of NAMES) store.writeAssay(tableId, { name, unit: 'ppm' }, values, qualifiers);
  store.publish(tableId);
  const reader = openMappedStore(file);
  const ids = reader.db.prepare<[], number>('SELECT id FROM columns').pluck().all();
  const blobs = reader.db.prepare<[number], Buffer>('SELECT value_bytes FROM column_chunks WHERE column_id = ?').pluck();
  return {
    workload: `load ${N_COLUMNS} columns of ${N_ROWS} rows, chunks of ${CHUNK_ROWS}`,
    peerName: 'bare driver, BLOBs joined',
    targetMs: 1_000,
    ours: () => {
      reader.readMany(tableId, NAMES);
    },
    peer: () => {
      ids.map((columnId) => Buffer.concat(blobs.all(columnId)));
    },
    close: () => {
      reader.close();
      remove();
    },
  };
}
