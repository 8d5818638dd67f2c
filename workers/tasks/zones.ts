import type { Zone, ZoneRun } from '#contract/geomet.ts';
import { FRAME } from '#contract/snapshots.ts';
import { QUALIFIER } from '#contract/tables.ts';
import { deleteriousZones, type DeleteriousZones } from '#kernels/geomet/deleterious-elements.ts';
import { flaggedShares } from '#kernels/geomet/flagged-shares.ts';
import type { Category } from '#kernels/tables/category.ts';
import type { ColumnStore } from '#server/db/column-store.ts';
import { domainsOf, zoneColumn } from '#workers/frame/code-rows.ts';
import { holeStartsOf } from '#workers/frame/hole-starts.ts';
import { ofSupport, overFrame, readAssay, readFrameCategory, readLengths, supportRange, type SnapshotTables, type Support } from '#workers/frame/snapshot-tables.ts';
import { defineTask } from '#workers/task.ts';

export interface ZonesInput {
  depositId: number;
  jobId: number;
  tables: SnapshotTables;
  support: Support;
  limits: { analyte: string; limitPpm: number }[];
  minLengthM: number;
  maxDilutionM: number;
  /** Null while no grouping stands on this snapshot: shares by domain are then left out. */
  groupingTableId: number | null;
  domains: { code: string; groupLabels: number[] }[];
}

export interface ZonesOutput {
  tableId: number;
  found: Zone[];
  result: Pick<ZoneRun, 'zones' | 'flaggedMetres' | 'totalMetres' | 'byAnalyte' | 'byDomain' | 'notes' | 'finding'>;
}

/** Surface samples are points: each stands alone, so a sample over the limit is a zone by itself. */
function intervalsOf(store: ColumnStore, { tables, support }: ZonesInput) {
  const range = supportRange(tables, support);
  const nRows = range.end - range.start;
  if (support === 'surface') {
    const names = store.readText(tables.frameTableId, FRAME.sample, range);
    const ones = new Float64Array(nRows).fill(1);
    return { names, intervals: { holeStarts: Int32Array.from({ length: nRows + 1 }, (_, i) => i), fromM: new Float64Array(nRows), toM: ones } };
  }
  const { codes, dictionary } = readFrameCategory(store, tables, support, FRAME.hole);
  const fromM = store.readNumbers(tables.frameTableId, FRAME.from, range);
  const toM = store.readNumbers(tables.frameTableId, FRAME.to, range);
  const holeStarts = holeStartsOf(codes);
  const names = Array.from(holeStarts.subarray(0, -1), (row) => dictionary[codes[row] ?? -1] ?? '');
  return { names, intervals: { holeStarts, fromM, toM } };
}

function elementsOf(store: ColumnStore, { tables, support, limits }: ZonesInput) {
  return limits.map(({ analyte, limitPpm }) => {
    const { values, qualifiers } = readAssay(store, tables, support, analyte);
    return { analyte, limitPpm, valuesPpm: values, isLowerBound: qualifiers.map((qualifier) => (qualifier === QUALIFIER.above ? 1 : 0)) };
  });
}

function codesOf(store: ColumnStore, { groupingTableId, domains, tables, support }: ZonesInput): Category | null {
  if (groupingTableId === null || domains.length === 0) return null;
  return domainsOf(ofSupport(store, groupingTableId, 'group', tables, support), domains, readLengths(store, tables, support));
}

function sharesByDomain(domains: Category | null, lengths: Float64Array, zones: DeleteriousZones): ZoneRun['byDomain'] {
  if (!domains) return [];
  const perElement = zones.byElement.map(({ analyte, inZone }) => ({ analyte, shares: flaggedShares(domains, lengths, inZone) }));
  return flaggedShares(domains, lengths, zones.isFlagged).map(({ code, metres, flaggedMetres, share }, place) => ({
    code, metres, flaggedMetres, share: share ?? 0,
    byAnalyte: perElement.map(({ analyte, shares }) => ({ analyte, metres: shares[place]?.flaggedMetres ?? 0, share: shares[place]?.share ?? 0 })),
  }));
}

/** Flags intervals at or over the limits, joins them into zones by the run rules, and says which domains they load. */
export default defineTask<ZonesInput, ZonesOutput>((input, { report, store }) => {
  const { depositId, jobId, tables, support, minLengthM, maxDilutionM } = input;
  report('read columns', 0);
  const { names, intervals } = intervalsOf(store(), input);
  const elements = elementsOf(store(), input);
  const rules = support === 'surface' ? { minLengthM: 0, maxDilutionM: 0 } : { minLengthM, maxDilutionM };
  const zones = deleteriousZones(intervals, elements, rules, (share) => report('join zones', 0.1 + 0.6 * share));
  const domains = codesOf(store(), input);
  const byDomain = sharesByDomain(domains, readLengths(store(), tables, support), zones);
  report('write flags', 0.8);
  const tableId = store().createTable({ depositId, nRows: tables.rows, purpose: 'deleterious zones', jobId });
  store().writeNumbers(tableId, { name: 'flagged' }, overFrame(Float64Array.from(zones.isFlagged), tables, support));
  for (const { analyte, inZone } of zones.byElement) store().writeNumbers(tableId, { name: zoneColumn(analyte) }, overFrame(Float64Array.from(inZone), tables, support));
  const { start } = supportRange(tables, support);
  const found = zones.byElement.flatMap(({ analyte, zones: ofElement }) => ofElement.map((zone): Zone => ({
    hole: names[zone.hole] ?? '', fromM: zone.fromM, toM: zone.toM, lengthM: zone.lengthM, analyte, meanPpm: zone.meanPpm, maxPpm: zone.maxPpm, dilutionM: zone.dilutionM,
    domains: domainsWithin(domains, zone.firstRow, zone.lastRow), firstRow: start + zone.firstRow, lastRow: start + zone.lastRow,
  })));
  const byAnalyte = zones.byElement.map(({ analyte, zones: ofElement, zoneMetres, intervalsOver, metresOver }) => ({ analyte, zones: ofElement.length, metres: zoneMetres, intervalsOver, metresOver }));
  const notes = notesOf(input, domains === null);
  return { tableId, found, result: { zones: found.length, flaggedMetres: zones.flaggedMetres, totalMetres: zones.totalMetres, byAnalyte, byDomain, notes, finding: findingOf(byAnalyte, byDomain, zones) } };
});

function domainsWithin(domains: Category | null, first: number, last: number): string[] {
  if (!domains) return [];
  const seen = new Set(domains.codes.subarray(first, last + 1));
  return [...seen].map((code) => domains.levels[code] ?? '').filter((code) => code !== '');
}

function notesOf({ support }: ZonesInput, isWithoutDomains: boolean): string[] {
  const notes: string[] = [];
  if (support === 'surface') notes.push('Surface samples are points: each sample at or over a limit is flagged by itself, and shares count samples.');
  if (isWithoutDomains) notes.push('No domains stand on this snapshot yet: shares by domain follow once they do.');
  return notes;
}

function findingOf(byAnalyte: ZoneRun['byAnalyte'], byDomain: ZoneRun['byDomain'], { flaggedMetres, totalMetres }: DeleteriousZones): string {
  const loaded = byAnalyte.filter(({ zones }) => zones > 0);
  if (loaded.length === 0) return 'No run of intervals reaches these limits for long enough to be a zone.';
  const share = totalMetres > 0 ? ((100 * flaggedMetres) / totalMetres).toFixed(1) : '0';
  const worst = byDomain.reduce<ZoneRun['byDomain'][number] | null>((most, domain) => (domain.share > (most?.share ?? 0) ? domain : most), null);
  const where = worst ? ` ${worst.code} is loaded most, ${(100 * worst.share).toFixed(0)} % of it.` : '';
  return `${share} % of the metres lie in zones of ${loaded.map(({ analyte }) => analyte).join(', ')}.${where}`;
}
