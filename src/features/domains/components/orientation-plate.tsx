import { useMemo, useRef, useState } from 'react';
import type { DomainEvidence, OrientationSet } from '#contract/domains.ts';
import type { ChartHandle } from '#src/components/charts/chart-types.ts';
import { Stereonet } from '#src/components/charts/stereonet.tsx';
import { Empty } from '#src/components/ui/empty.tsx';
import { useFigureExports } from '#src/components/ui/figure-exports.ts';
import { Plate } from '#src/components/ui/plate.tsx';
import { Select } from '#src/components/ui/select.tsx';
import type { Column } from '#src/components/ui/table/column.ts';
import { Table } from '#src/components/ui/table/table.tsx';
import { formatCount, formatFixed } from '#src/lib/format.ts';
import { meanSetOf, polesOf, typesOf } from '../model.ts';

const HELP = {
  text: 'Poles to planes on an equal-area net, lower half. The mean plane is the first axis of the orientation tensor; α95 is Fisher’s cone about the mean pole. K above 1 is a cluster, below 1 a girdle; C is its strength.',
  caution: 'Planes nearly parallel to the holes are hardly cut by them. Readings of low confidence are drawn as crosses and kept out of the mean.',
  source: 'Fisher 1953; Woodcock 1977; Bingham 1974',
};

const fixed = (value: number | null, digits: number): string => (value === null ? '–' : formatFixed(value, digits));
const planeOf = ({ meanPlane }: OrientationSet): string => (meanPlane ? `${formatFixed(meanPlane.dip, 0)} / ${meanPlane.dipDirection === null ? '–' : String(Math.round(meanPlane.dipDirection) % 360).padStart(3, '0')}` : '–');

const COLUMNS: Column<OrientationSet>[] = [
  { header: 'Confidence', rowHeader: true, cell: ({ confidence }) => confidence, value: ({ confidence }) => confidence },
  { header: 'n', align: 'right', cell: ({ n }) => formatCount(n), value: ({ n }) => n },
  { header: 'Mean plane', unit: 'dip / direction, °', align: 'right', cell: planeOf, value: planeOf },
  { header: 'α95', unit: '°', align: 'right', cell: ({ alpha95 }) => fixed(alpha95, 1), value: ({ alpha95 }) => alpha95 },
  { header: 'S1', align: 'right', cell: ({ eigenvalues }) => fixed(eigenvalues?.[0] ?? null, 2), value: ({ eigenvalues }) => eigenvalues?.[0] ?? null },
  { header: 'K', align: 'right', cell: ({ woodcockK }) => fixed(woodcockK, 2), value: ({ woodcockK }) => woodcockK },
  { header: 'C', align: 'right', cell: ({ strengthC }) => fixed(strengthC, 2), value: ({ strengthC }) => strengthC },
];

/** Structures inside the domain on a net, with statistics by confidence. */
export function OrientationPlate({ evidence }: { evidence: DomainEvidence }) {
  const types = useMemo(() => typesOf(evidence.structures), [evidence]);
  const [picked, setPicked] = useState('');
  const type = types.includes(picked) ? picked : (types[0] ?? '');
  const chartRef = useRef<ChartHandle>(null);
  const lines = useMemo(() => polesOf(evidence.structures, type), [evidence, type]);
  const mean = meanSetOf(evidence.orientations, type);
  const meanPlane = mean?.meanPlane && mean.meanPlane.dipDirection !== null ? { dip: mean.meanPlane.dip, dipDirection: mean.meanPlane.dipDirection } : null;
  const sets = evidence.orientations.filter(({ structureType }) => structureType === type);
  const caption = `Poles to ${type}, equal area, lower half · n = ${formatCount(lines.length)} · mean of ${mean?.confidence ?? 'none'} · snapshot ${evidence.snapshotNumber}`;
  const exports = useFigureExports(chartRef, { fileName: 'orientation', caption });
  if (types.length === 0) return <Plate title="Orientation" empty={<Empty>No oriented structure lies inside this domain. Load structures in Intake, or ask site to measure some.</Empty>} />;
  return (
    <Plate title="Orientation" tools={types.length > 1 && <Select label="Structure type" isLabelHidden controlSize="tiny" options={types.map((value) => ({ value, label: value }))} value={type} onPick={setPicked} />} help={HELP} caption={caption} exports={exports}>
      <Stereonet title="Structures inside the domain" description={mean?.reading ?? 'No mean plane.'} lines={lines} meanPlane={meanPlane} cone95={mean?.alpha95 ?? null} height={250} chartRef={chartRef} />
      <Table caption={`Orientation of ${type} by confidence`} columns={COLUMNS} rows={sets} rowKey={({ confidence }) => confidence} isDense />
      {mean && <p className="mt-1 text-small text-ink-2">{mean.reading}</p>}
    </Plate>
  );
}
