import type { Knex } from 'knex';
import type * as z from 'zod';
import { HoleDetail, HoleRow } from '#contract/holes.ts';
import { orNotFound } from '#server/lib/errors.ts';
import type { SnapshotsService } from '#server/modules/snapshots/snapshots.service.ts';
import type { ColumnStore } from '#server/db/column-store.ts';

export interface HolesRow {
  deposit_id: number;
  snapshot_id: string;
  hole: string;
  x: number;
  y: number;
  z: number;
  length_m: number;
  assayed_m: number;
  first_row: number;
  intervals: number;
  campaign: string | null;
  trace: string;
  detail: string;
}

const Trace = HoleRow.shape.trace;
/** The logs of a hole as assembly stored them. */
const StoredDetail = HoleDetail.pick({ stations: true, lithology: true, weathering: true, structures: true, notes: true });
export type StoredHoleDetail = z.infer<typeof StoredDetail>;

const toHole = (row: HolesRow): HoleRow => ({
  hole: row.hole, x: row.x, y: row.y, z: row.z, lengthM: row.length_m, assayedM: row.assayed_m, intervals: row.intervals, firstRow: row.first_row, campaign: row.campaign,
  trace: Trace.parse(JSON.parse(row.trace)),
});

const SUMMARY = ['hole', 'x', 'y', 'z', 'length_m', 'assayed_m', 'first_row', 'intervals', 'campaign', 'trace'] as const;

export function createHoles(db: Knex, store: ColumnStore, snapshots: SnapshotsService) {
  /** Assays of one hole, read as a row range of each analyte's column. */
  function assaysOf(tableId: number | null, { firstRow, intervals }: HoleRow, analytes: readonly string[]): HoleDetail['assays'] {
    if (tableId === null || intervals === 0) return [];
    const range = { start: firstRow, end: firstRow + intervals };
    const from = store.readNumbers(tableId, 'from', range);
    const to = store.readNumbers(tableId, 'to', range);
    const hasSamples = store.describe(tableId).columns.some(({ name }) => name === 'sample');
    const samples = hasSamples ? store.readText(tableId, 'sample', range) : [];
    const values = analytes.map((analyte) => store.readNumbers(tableId, analyte, range));
    const marks = analytes.map((analyte) => store.readQualifiers(tableId, analyte, range));
    return Array.from(from, (fromM, i) => ({
      row: firstRow + i,
      fromM,
      toM: to[i] ?? fromM,
      sample: samples[i] ?? '',
      ppm: values.map((column) => finiteOrNull(column[i])),
      marks: marks.map((column) => column[i] ?? 4),
    }));
  }

  return {
    async list(depositId: number) {
      const snapshot = await snapshots.latest(depositId);
      if (!snapshot) return { snapshotId: null, holes: [], faults: [] };
      const rows = await db<HolesRow>('holes').where({ deposit_id: depositId, snapshot_id: snapshot.id }).orderBy('hole').select(...SUMMARY);
      return { snapshotId: snapshot.id, holes: rows.map((row) => toHole({ deposit_id: depositId, snapshot_id: snapshot.id, detail: '', ...row })), faults: snapshot.faults };
    },

    async get(depositId: number, holeName: string): Promise<HoleDetail> {
      const snapshot = orNotFound(await snapshots.latest(depositId), 'hole');
      const found = await db<HolesRow>('holes').where({ deposit_id: depositId, snapshot_id: snapshot.id, hole: holeName }).first();
      const row = orNotFound(found, 'hole');
      const hole = toHole(row);
      const analytes = snapshot.analytes.filter(({ supports }) => supports.includes('drill')).map(({ analyte }) => analyte);
      return { ...hole, ...StoredDetail.parse(JSON.parse(row.detail)), analytes, assays: assaysOf(snapshot.assayTableId, hole, analytes) };
    },
  };
}
export type HolesService = ReturnType<typeof createHoles>;

const finiteOrNull = (value: number | undefined): number | null => (value === undefined || Number.isNaN(value) ? null : value);
