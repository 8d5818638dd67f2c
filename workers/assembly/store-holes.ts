import type { Database } from 'better-sqlite3';
import type { LoggedInterval, StructureReading } from '#contract/holes.ts';
import { positionsAtDepths } from '#kernels/geometry/position-at-depth.ts';
import { traceHole } from '#kernels/geometry/trace.ts';
import type { SurveyedHole } from './hole-paths.ts';

export interface HoleLogs {
  lithology: LoggedInterval[];
  weathering: LoggedInterval[];
  structures: StructureReading[];
  firstRow: number;
  intervals: number;
  assayedM: number;
}

const BATCH = 100;
const round = (value: number): number => Math.round(value * 1000) / 1000;

/** Chords of a drawn trace stay this close to the arc. */
const TRACE_TOLERANCE_M = 0.25;

function traceOf({ path, lengthM }: SurveyedHole): number[][] {
  const { positions } = traceHole(path, lengthM, { toleranceM: TRACE_TOLERANCE_M });
  return Array.from({ length: positions.length / 3 }, (_, i) => [0, 1, 2].map((axis) => round(positions[3 * i + axis] ?? 0)));
}

function stationsOf({ stations, path }: SurveyedHole) {
  const sorted = [...stations].sort((a, b) => a.depthM - b.depthM);
  const { positions } = positionsAtDepths(path, Float64Array.from(sorted, ({ depthM }) => depthM));
  return sorted.map((station, i) => ({ ...station, x: round(positions[3 * i] ?? 0), y: round(positions[3 * i + 1] ?? 0), z: round(positions[3 * i + 2] ?? 0) }));
}

/** Writes one row per hole of a snapshot, in short transactions; rows of an earlier try go first. */
export function storeHoles(db: Database, depositId: number, snapshotId: string, holes: readonly SurveyedHole[], logsOf: (hole: string) => HoleLogs): void {
  db.prepare('DELETE FROM holes WHERE deposit_id = ? AND snapshot_id = ?').run(depositId, snapshotId);
  const insert = db.prepare(
    'INSERT INTO holes (deposit_id, snapshot_id, hole, x, y, z, length_m, assayed_m, first_row, intervals, campaign, trace, detail) VALUES (?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?)',
  );
  const writeBatch = db.transaction((batch: readonly SurveyedHole[]) => {
    for (const hole of batch) {
      const { firstRow, intervals, assayedM, ...logs } = logsOf(hole.name);
      const detail = JSON.stringify({ ...logs, stations: stationsOf(hole), notes: hole.notes });
      const [x, y, z] = hole.collar;
      insert.run(depositId, snapshotId, hole.name, x, y, z, hole.lengthM, assayedM, firstRow, intervals, hole.campaign, JSON.stringify(traceOf(hole)), detail);
    }
  });
  for (let start = 0; start < holes.length; start += BATCH) writeBatch(holes.slice(start, start + BATCH));
}
