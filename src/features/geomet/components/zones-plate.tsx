import { useQuery } from '@tanstack/react-query';
import { Download } from 'lucide-react';
import { useMemo } from 'react';
import type { GradeUnit } from '#contract/deposits.ts';
import { downloadZones, type Zone, type ZoneRun } from '#contract/geomet.ts';
import { Button, DownloadButton } from '#src/components/ui/button.tsx';
import { Empty } from '#src/components/ui/empty.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { Select } from '#src/components/ui/select.tsx';
import type { Column } from '#src/components/ui/table/column.ts';
import { Table } from '#src/components/ui/table/table.tsx';
import { endpointUrl } from '#src/lib/api-client.ts';
import { formatCount, formatDepth, formatFixed, formatGrade } from '#src/lib/format.ts';
import { takeRows } from '#src/lib/selection.ts';
import { urlNumber, urlText, useUrlState } from '#src/lib/url-state.ts';
import { useDepositId } from '#src/lib/use-deposit.ts';
import { ZONE_PAGE, zonesQuery } from '../api/geomet-queries.ts';

const VIEW = { element: urlText(), zonePage: urlNumber(1) };

const rowsOf = ({ firstRow, lastRow }: Zone): Int32Array => Int32Array.from({ length: lastRow - firstRow + 1 }, (_, i) => firstRow + i);

function columnsFor(unitOf: (analyte: string) => GradeUnit): Column<Zone>[] {
  return [
    { header: 'Hole', rowHeader: true, isMono: true, value: ({ hole }) => hole, cell: ({ hole }) => hole },
    { header: 'From', unit: 'm', align: 'right', isMono: true, value: ({ fromM }) => fromM, cell: ({ fromM }) => formatDepth(fromM) },
    { header: 'To', unit: 'm', align: 'right', isMono: true, value: ({ toM }) => toM, cell: ({ toM }) => formatDepth(toM) },
    { header: 'Length', unit: 'm', align: 'right', value: ({ lengthM }) => lengthM, cell: ({ lengthM }) => formatFixed(lengthM, 1) },
    { header: 'Element', value: ({ analyte }) => analyte, cell: ({ analyte }) => analyte },
    { header: 'Mean', align: 'right', value: ({ meanPpm }) => meanPpm, cell: ({ meanPpm, analyte }) => formatGrade(meanPpm, unitOf(analyte)) },
    { header: 'Largest', align: 'right', value: ({ maxPpm }) => maxPpm, cell: ({ maxPpm, analyte }) => formatGrade(maxPpm, unitOf(analyte)) },
    { header: 'Dilution', unit: 'm', align: 'right', value: ({ dilutionM }) => dilutionM, cell: ({ dilutionM }) => formatFixed(dilutionM, 1) },
    { header: 'Domains', isMono: true, value: ({ domains }) => domains.join(' '), cell: ({ domains }) => domains.join(' ') },
  ];
}

/** Zones of the run, longest first; a row marks its intervals in the core. */
export function ZonesPlate({ run }: { run: ZoneRun }) {
  const depositId = useDepositId();
  const [view, setView] = useUrlState(VIEW);
  const { data, error, refetch, isFetching } = useQuery(zonesQuery(depositId, run.id, view.element, view.zonePage));
  const columns = useMemo(() => columnsFor((analyte) => run.rules.limits.find((limit) => limit.analyte === analyte)?.unit ?? 'ppm'), [run]);
  const pages = data ? Math.max(1, Math.ceil(data.total / ZONE_PAGE)) : 1;
  const elements = [{ value: '', label: 'all elements' }, ...run.byAnalyte.map(({ analyte }) => ({ value: analyte, label: analyte }))];
  return (
    <Plate
      title="Zones"
      qualifier={data && `${formatCount(data.total)}, longest first`}
      tools={<><Select label="Element" isLabelHidden controlSize="tiny" options={elements} value={view.element} onPick={(element) => setView({ element, zonePage: 1 })} /><DownloadButton size="tiny" icon={Download} href={endpointUrl(downloadZones, { params: { depositId, runId: run.id } })}>CSV</DownloadButton></>}
      stale={run.isStale && 'tables, limits or domains changed'}
      error={data ? undefined : error}
      onRetry={() => void refetch()}
      busy={isFetching && data ? { progress: null, phase: 'reading' } : null}
      caption={`Length-weighted means · minimum ${formatFixed(run.rules.minLengthM, 1)} m, internal dilution at most ${formatFixed(run.rules.maxDilutionM, 1)} m · snapshot ${run.snapshotNumber}`}
    >
      {data && <Table caption="Deleterious zones" columns={columns} rows={data.rows} rowKey={(zone) => `${zone.hole} ${zone.fromM} ${zone.analyte}`} maxHeightRem={26} onPick={(zone) => takeRows(rowsOf(zone), `${zone.analyte} zone in ${zone.hole}`, 'replace')} empty={<Empty>No run of intervals reaches these limits for long enough.</Empty>} />}
      {pages > 1 && (
        <nav aria-label="Pages of zones" className="mt-2 flex items-center justify-end gap-2 text-caption text-ink-2">
          <Button size="tiny" unavailable={view.zonePage <= 1 && 'This is the first page'} onClick={() => setView({ zonePage: view.zonePage - 1 })}>Before</Button>
          page {view.zonePage} of {pages}
          <Button size="tiny" unavailable={view.zonePage >= pages && 'This is the last page'} onClick={() => setView({ zonePage: view.zonePage + 1 })}>After</Button>
        </nav>
      )}
    </Plate>
  );
}
