import type { HoleDetail, LoggedInterval, StructureReading } from '#contract/holes.ts';
import type { DepthInterval } from '#src/components/charts/core-types.ts';
import { Plate } from '#src/components/ui/plate.tsx';
import { Segmented } from '#src/components/ui/segmented.tsx';
import type { Column } from '#src/components/ui/table/column.ts';
import { Table } from '#src/components/ui/table/table.tsx';
import { tableExports } from '#src/components/ui/table/table-tools.tsx';
import { countOf, formatDepth, formatFixed } from '#src/lib/format.ts';

export const LOGS = ['lithology', 'weathering', 'structures', 'survey'] as const;
export type Log = (typeof LOGS)[number];

interface Props {
  hole: HoleDetail;
  log: Log;
  onLog: (log: Log) => void;
  framed: DepthInterval | null;
  onFrame: (interval: DepthInterval | null) => void;
}

type Station = HoleDetail['stations'][number];

const LOG_NAMES: Record<Log, string> = { lithology: 'Rock', weathering: 'Weathering', structures: 'Structures', survey: 'Survey' };

const depthColumn = <Row extends { depthM: number }>(): Column<Row> => ({
  header: 'Depth', unit: 'm', align: 'right', rowHeader: true, isMono: true, widthRem: 4.5, cell: ({ depthM }) => formatDepth(depthM), value: ({ depthM }) => depthM,
});

const INTERVAL_COLUMNS: Column<LoggedInterval>[] = [
  { header: 'From', unit: 'm', align: 'right', rowHeader: true, isMono: true, cell: ({ fromM }) => formatDepth(fromM), value: ({ fromM }) => fromM },
  { header: 'To', unit: 'm', align: 'right', isMono: true, cell: ({ toM }) => formatDepth(toM), value: ({ toM }) => toM },
  { header: 'Length', unit: 'm', align: 'right', isMono: true, cell: ({ fromM, toM }) => formatDepth(toM - fromM), value: ({ fromM, toM }) => toM - fromM },
  { header: 'Code', cell: ({ code }) => code },
];

const degrees = (header: string, read: (row: StructureReading) => number | null): Column<StructureReading> => ({
  header, unit: '°', align: 'right', widthRem: 4, cell: (row) => { const angle = read(row); return angle === null ? null : formatFixed(angle, 0); }, value: read,
});

const STRUCTURE_COLUMNS: Column<StructureReading>[] = [
  depthColumn<StructureReading>(),
  { header: 'Type', widthRem: 6, cell: ({ type }) => type },
  degrees('Alpha', ({ alpha }) => alpha),
  degrees('Beta', ({ beta }) => beta),
  degrees('Dip', ({ dip }) => dip),
  degrees('Dip direction', ({ dipDirection }) => dipDirection),
  { header: 'Confidence', cell: ({ confidence }) => confidence },
];

const number = (header: string, unit: string, read: (row: Station) => number, decimals = 1): Column<Station> => ({
  header, unit, align: 'right', cell: (row) => formatFixed(read(row), decimals), value: read,
});

const STATION_COLUMNS: Column<Station>[] = [
  depthColumn<Station>(),
  number('Azimuth', '°', ({ azimuth }) => azimuth),
  number('Dip', '°', ({ dip }) => dip),
  number('East', 'm', ({ x }) => x),
  number('North', 'm', ({ y }) => y),
  number('Elevation', 'm', ({ z }) => z),
];

/** What is logged and measured in one hole, a table at a time. */
export function LogsPlate(props: Props) {
  const { hole, log, onLog } = props;
  const { lithology, weathering, structures, stations } = hole;
  const rows = { lithology, weathering, structures, survey: stations }[log];
  const what = { lithology: 'interval', weathering: 'interval', structures: 'reading', survey: 'station' }[log];
  return (
    <Plate
      title="Logs and survey"
      qualifier={countOf(rows.length, what)}
      tools={<Segmented label="Table shown" segments={LOGS.map((value) => ({ value, label: LOG_NAMES[value] }))} value={log} onPick={onLog} />}
      exports={exportsOf(hole, log)}
    >
      {rows.length === 0 ? <p className="py-1 text-ink-2">None in this hole.</p> : <LogTable {...props} />}
    </Plate>
  );
}

function exportsOf({ hole, lithology, weathering, structures, stations }: HoleDetail, log: Log) {
  const name = `${hole}-${log}`;
  if (log === 'structures') return tableExports(name, STRUCTURE_COLUMNS, structures);
  if (log === 'survey') return tableExports(name, STATION_COLUMNS, stations);
  return tableExports(name, INTERVAL_COLUMNS, log === 'lithology' ? lithology : weathering);
}

const HEIGHT_REM = 26;

function LogTable({ hole, log, framed, onFrame }: Props) {
  const caption = `${LOG_NAMES[log]} of ${hole.hole}`;
  if (log === 'survey') return <Table caption={caption} columns={STATION_COLUMNS} rows={hole.stations} maxHeightRem={HEIGHT_REM} isDense />;
  if (log === 'structures') {
    const around = ({ depthM }: StructureReading): DepthInterval => ({ fromM: Math.max(0, depthM - 0.5), toM: depthM + 0.5 });
    const isPicked = (reading: StructureReading) => framed?.fromM === around(reading).fromM && framed.toM === around(reading).toM;
    return <Table caption={caption} columns={STRUCTURE_COLUMNS} rows={hole.structures} maxHeightRem={HEIGHT_REM} isDense isPicked={isPicked} onPick={(reading) => onFrame(isPicked(reading) ? null : around(reading))} />;
  }
  const isPicked = ({ fromM, toM }: LoggedInterval) => framed?.fromM === fromM && framed.toM === toM;
  return <Table caption={caption} columns={INTERVAL_COLUMNS} rows={hole[log]} maxHeightRem={HEIGHT_REM} isPicked={isPicked} onPick={(interval) => onFrame(isPicked(interval) ? null : interval)} />;
}
