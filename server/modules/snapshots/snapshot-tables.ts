import type { Snapshot } from '#contract/snapshots.ts';
import type { SnapshotTables } from '#workers/frame/snapshot-tables.ts';

/** What tasks need to find a snapshot's columns. */
export const tablesOf = ({ frameTableId, assayTableId, surfaceTableId, rows, surfaceRows }: Snapshot): SnapshotTables => ({
  frameTableId, assayTableId, surfaceTableId, rows, surfaceRows,
});
