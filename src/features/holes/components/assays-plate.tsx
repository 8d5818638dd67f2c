import { useMemo, useState } from 'react';
import type { GradeUnit } from '#contract/deposits.ts';
import type { HoleDetail } from '#contract/holes.ts';
import { CELL_LOOKS, CellLegend, LookWord } from '#src/components/ui/cell-mark.tsx';
import { Empty } from '#src/components/ui/empty.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { Segmented } from '#src/components/ui/segmented.tsx';
import type { Column } from '#src/components/ui/table/column.ts';
import { Table } from '#src/components/ui/table/table.tsx';
import { tableExports } from '#src/components/ui/table/table-tools.tsx';
import { cx } from '#src/lib/cx.ts';
import { countOf, formatDepth } from '#src/lib/format.ts';
import { assayCell, type AssayRow } from '../assay-cells.ts';

interface Props {
  hole: HoleDetail;
  /** Pay and deleterious analytes and the one drawn; the others are shown on demand. */
  chief: readonly string[];
  unitOf: (analyte: string) => GradeUnit;
  framedRow: number | null;
  onFrame: (row: AssayRow | null) => void;
}

const LEGEND = ['below', 'above', 'missing'] as const;
const EXAMPLES = { below: '<2', above: '>1', missing: 'none', refused: '', warned: '' };

function columnsFor(hole: HoleDetail, shown: readonly string[], unitOf: Props['unitOf']): Column<AssayRow>[] {
  const grade = (analyte: string): Column<AssayRow> => {
    const [place, unit] = [hole.analytes.indexOf(analyte), unitOf(analyte)];
    return {
      header: analyte,
      unit,
      align: 'right',
      widthRem: 5,
      isMono: true,
      cell: (row) => {
        const { look, text } = assayCell(row, place, unit);
        return text && <span className={cx('-my-0.5 inline-block px-1 py-0.5', CELL_LOOKS[look])}>{text}<LookWord look={look} /></span>;
      },
      value: (row) => assayCell(row, place, unit).value,
    };
  };
  return [
    { header: 'From', unit: 'm', align: 'right', rowHeader: true, isMono: true, widthRem: 5, cell: ({ fromM }) => formatDepth(fromM), value: ({ fromM }) => fromM },
    { header: 'To', unit: 'm', align: 'right', isMono: true, widthRem: 5, cell: ({ toM }) => formatDepth(toM), value: ({ toM }) => toM },
    { header: 'Sample', isMono: true, widthRem: 7, cell: ({ sample }) => sample },
    ...shown.map(grade),
  ];
}

/** Assays of one hole, marks as in the files; a pressed row is framed on the core. */
export function AssaysPlate({ hole, chief, unitOf, framedRow, onFrame }: Props) {
  const [extent, setExtent] = useState<'chief' | 'all'>('chief');
  const shown = useMemo(() => (extent === 'all' ? hole.analytes : chief.filter((analyte) => hole.analytes.includes(analyte))), [extent, hole, chief]);
  const columns = useMemo(() => columnsFor(hole, shown, unitOf), [hole, shown, unitOf]);
  const all = useMemo(() => columnsFor(hole, hole.analytes, unitOf), [hole, unitOf]);
  return (
    <Plate
      title="Assays"
      qualifier={countOf(hole.assays.length, 'interval')}
      tools={hole.assays.length > 0 && <Segmented label="Analytes shown" segments={[{ value: 'chief', label: 'Chief' }, { value: 'all', label: `All ${hole.analytes.length}` }]} value={extent} onPick={setExtent} />}
      exports={hole.assays.length > 0 ? tableExports(`${hole.hole}-assays`, all, hole.assays) : undefined}
      empty={hole.assays.length === 0 ? <Empty>No assays lie in this hole. They are shown here once a file of assays names it.</Empty> : undefined}
    >
      <Table
        caption={`Assays of ${hole.hole}`}
        columns={columns}
        rows={hole.assays}
        rowKey={({ row }) => row}
        maxHeightRem={24}
        isPicked={({ row }) => row === framedRow}
        onPick={(row) => onFrame(row.row === framedRow ? null : row)}
      />
      <div className="pt-1.5"><CellLegend looks={LEGEND} examples={EXAMPLES} /></div>
    </Plate>
  );
}
