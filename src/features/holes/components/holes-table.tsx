import { useMemo } from 'react';
import { Link } from 'react-router-dom';
import type { HoleRow } from '#contract/holes.ts';
import { Empty } from '#src/components/ui/empty.tsx';
import { Field } from '#src/components/ui/field.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import type { Column } from '#src/components/ui/table/column.ts';
import { Table } from '#src/components/ui/table/table.tsx';
import { tableExports } from '#src/components/ui/table/table-tools.tsx';
import { countOf, formatCount, formatFixed, formatShare } from '#src/lib/format.ts';
import { findHoles } from '../hole-plan.ts';
import { holePath } from '../hole-path.ts';

interface Props {
  depositId: number;
  holes: readonly HoleRow[];
  find: string;
  onFind: (text: string) => void;
  chosen: string;
  onChoose: (hole: string) => void;
  fileName: string;
}

const assayedShare = ({ assayedM, lengthM }: HoleRow): number => (lengthM > 0 ? assayedM / lengthM : NaN);

const columnsFor = (depositId: number): Column<HoleRow>[] => [
  { header: 'Hole', rowHeader: true, isMono: true, widthRem: 7, cell: ({ hole }) => <Link to={holePath(depositId, hole)}>{hole}</Link>, value: ({ hole }) => hole },
  { header: 'Campaign', widthRem: 5.5, cell: ({ campaign }) => campaign, value: ({ campaign }) => campaign },
  { header: 'Length', unit: 'm', align: 'right', widthRem: 5, cell: ({ lengthM }) => formatFixed(lengthM, 1), value: ({ lengthM }) => lengthM },
  { header: 'Assayed', align: 'right', widthRem: 5, cell: (row) => formatShare(assayedShare(row)), value: assayedShare },
  { header: 'Intervals', align: 'right', widthRem: 5, cell: ({ intervals }) => formatCount(intervals), value: ({ intervals }) => intervals },
  { header: 'East', unit: 'm', align: 'right', widthRem: 6, cell: ({ x }) => formatFixed(x, 1), value: ({ x }) => x },
  { header: 'North', unit: 'm', align: 'right', widthRem: 6, cell: ({ y }) => formatFixed(y, 1), value: ({ y }) => y },
  { header: 'Elevation', unit: 'm', align: 'right', cell: ({ z }) => formatFixed(z, 1), value: ({ z }) => z },
];

/** Every hole with its collar and how far it is assayed; a press marks it on the plan, its name opens it. */
export function HolesTable({ depositId, holes, find, onFind, chosen, onChoose, fileName }: Props) {
  const columns = useMemo(() => columnsFor(depositId), [depositId]);
  const found = useMemo(() => findHoles(holes, find), [holes, find]);
  return (
    <Plate
      title="Holes"
      qualifier={<span aria-live="polite">{found.length === holes.length ? countOf(holes.length, 'hole') : `${formatCount(found.length)} of ${countOf(holes.length, 'hole')}`}</span>}
      exports={tableExports(fileName, columns, found)}
      className="min-h-0"
    >
      <div className="flex h-full min-h-0 flex-col gap-2">
        <Field label="Find a hole or campaign" type="search" className="max-w-72" value={find} maxLength={120} onChange={(event) => onFind(event.target.value)} />
        <Table
          caption="Holes of the current snapshot"
          columns={columns}
          rows={found}
          rowKey={({ hole }) => hole}
          onPick={({ hole }) => onChoose(hole === chosen ? '' : hole)}
          isPicked={({ hole }) => hole === chosen}
          firstSort={{ header: 'Hole' }}
          maxHeightRem="place"
          className="min-h-0 flex-1 max-lg:max-h-[32rem]"
          empty={<Empty>No hole or campaign holds “{find.trim()}”.</Empty>}
        />
      </div>
    </Plate>
  );
}
