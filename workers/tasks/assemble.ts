import type { Snapshot } from '#contract/snapshots.ts';
import type { TableKind } from '#contract/files.ts';
import { summariseAnalytes } from '#workers/assembly/analyte-summaries.ts';
import { placeIntervals, type DrillRows } from '#workers/assembly/drill-rows.ts';
import { faultPlanes } from '#workers/assembly/faults.ts';
import { writeFrame } from '#workers/assembly/frame.ts';
import { surveyedHoles } from '#workers/assembly/hole-paths.ts';
import { codeMetres, logOntoIntervals, NOTHING_LOGGED, type LoggedCategory } from '#workers/assembly/logged-categories.ts';
import { loadedTable, type LoadedTable } from '#workers/assembly/read-rows.ts';
import { storeHoles } from '#workers/assembly/store-holes.ts';
import { placeStructures, type PlacedStructure } from '#workers/assembly/structures.ts';
import { writeStructures } from '#workers/assembly/structure-table.ts';
import { surfaceRows } from '#workers/assembly/surface-rows.ts';
import { defineTask } from '#workers/task.ts';

export interface AssembleInput {
  depositId: number;
  jobId: number;
  snapshotId: string;
  /** Assembled already, or nothing to assemble. */
  isDone: boolean;
  tables: Partial<Record<TableKind, number>>;
  refs: Snapshot['revisions'];
  /** Line that beta was read from. */
  referenceLine: 'bottom' | 'top';
}

export interface AssembleOutput {
  snapshotId: string;
  frameTableId: number;
  rows: number;
  surfaceRows: number;
  refs: Snapshot['revisions'];
  summary: Omit<Snapshot, 'id' | 'number' | 'createdAt' | 'isCurrent' | 'frameTableId' | 'revisions' | 'rows' | 'surfaceRows'>;
}

const NO_INTERVALS: DrillRows = {
  hole: [], fromM: new Float64Array(0), toM: new Float64Array(0), lengthM: new Float64Array(0), x: new Float64Array(0), y: new Float64Array(0), z: new Float64Array(0), runs: new Map(), notes: [],
};

/**
 * Joins the current tables into a snapshot: holes surveyed, intervals placed in space, logs brought
 * onto them, fault sides told, analytes summed up.
 */
export default defineTask<AssembleInput, AssembleOutput | null>((input, { report, store }) => {
  const { depositId, jobId, snapshotId, isDone, tables, refs } = input;
  if (isDone) return null;
  const open = (kind: TableKind): LoadedTable | null => {
    const tableId = tables[kind];
    return tableId === undefined ? null : loadedTable(store(), tableId);
  };
  report('survey holes', 0);
  const [collar, assay, surfaceTable] = [open('collar'), open('assay'), open('surface')];
  const holes = collar ? surveyedHoles(collar, open('survey')) : [];
  const holeByName = new Map(holes.map((hole) => [hole.name, hole]));
  report('place intervals', 0.15);
  const drill = assay ? placeIntervals(assay, holeByName) : NO_INTERVALS;
  report('bring logs onto intervals', 0.3);
  const log = (kind: 'lithology' | 'weathering'): LoggedCategory => {
    const table = open(kind);
    return table ? logOntoIntervals(table, drill) : NOTHING_LOGGED(drill.hole.length);
  };
  const [lithology, weathering] = [log('lithology'), log('weathering')];
  const faults = faultPlanes(open('fault'));
  const surface = surfaceRows(surfaceTable);
  report('write the frame', 0.45);
  const frame = writeFrame(store(), depositId, jobId, {
    drill, surface, lithology, weathering, faults, samples: assay?.texts('sample') ?? [], campaigns: assay?.texts('campaign') ?? [], surfaceCampaigns: surfaceTable?.texts('campaign') ?? [],
  });
  report('turn structures into planes', 0.6);
  const structureTable = open('structure');
  const structures = structureTable ? placeStructures(structureTable, holeByName, { referenceLine: input.referenceLine, ellipseEnd: 'down-hole' }) : [];
  const structureTableId = structures.length > 0 ? writeStructures(store(), depositId, jobId, structures) : null;
  report('sum up analytes', 0.7);
  const analytes = summariseAnalytes(store(), tables.assay ?? null, tables.surface ?? null);
  report('keep holes', 0.85);
  const structuresOf = groupByHole(structures);
  storeHoles(store().db, depositId, snapshotId, holes, (name) => {
    const run = drill.runs.get(name);
    const lengths = run ? drill.lengthM.subarray(run.first, run.first + run.count) : new Float64Array(0);
    return {
      lithology: lithology.intervalsOf(name), weathering: weathering.intervalsOf(name), structures: structuresOf.get(name) ?? [],
      firstRow: run?.first ?? 0, intervals: run?.count ?? 0, assayedM: lengths.reduce((sum, length) => sum + length, 0),
    };
  });
  const drillLengths = drill.lengthM;
  return {
    snapshotId, frameTableId: frame.tableId, rows: frame.nRows, surfaceRows: surface.nRows, refs,
    summary: {
      assayTableId: tables.assay ?? null, surfaceTableId: tables.surface ?? null, structureTableId, holes: holes.length,
      metresDrilled: holes.reduce((sum, { lengthM }) => sum + lengthM, 0), metresAssayed: drillLengths.reduce((sum, length) => sum + length, 0), metresLogged: lithology.metres,
      analytes, lithologies: codeMetres(frame.rock.codes, frame.rock.dictionary, frame.lengths), weatherings: codeMetres(weathering.codes, weathering.dictionary, drillLengths),
      faults, structures: structures.length, notes: [...drill.notes, ...noteOfHoles(holes)],
    },
  };
});

function groupByHole(structures: readonly PlacedStructure[]): Map<string, PlacedStructure[]> {
  const byHole = new Map<string, PlacedStructure[]>();
  for (const structure of structures) {
    const own = byHole.get(structure.hole);
    if (own) own.push(structure);
    else byHole.set(structure.hole, [structure]);
  }
  return byHole;
}

function noteOfHoles(holes: readonly { name: string; notes: string[] }[]): string[] {
  const noted = holes.filter(({ notes }) => notes.length > 0);
  if (noted.length === 0) return [];
  return [`${noted.length} ${noted.length === 1 ? 'hole has' : 'holes have'} survey notes, told on the hole’s page: ${noted.slice(0, 5).map(({ name }) => name).join(', ')}${noted.length > 5 ? ' and others' : ''}.`];
}
