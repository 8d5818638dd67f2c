import { useMemo } from 'react';
import type { ComponentRun } from '#contract/components.ts';
import { componentName } from '#src/components/ground/component-words.ts';
import { Plate } from '#src/components/ui/plate.tsx';
import type { Column } from '#src/components/ui/table/column.ts';
import { tableExports } from '#src/components/ui/table/table-tools.tsx';
import { Table } from '#src/components/ui/table/table.tsx';
import { cx } from '#src/lib/cx.ts';
import { formatFixed, formatShare } from '#src/lib/format.ts';
import { useDeposit } from '#src/lib/use-deposit.ts';
import { largeFrom } from '../model.ts';

interface LoadingRow {
  part: string;
  loadings: readonly number[];
}

interface Props {
  run: ComponentRun;
  stale: string | null;
}

const HELP = {
  text: 'Every analyte on every stored component; bold where the loading is at least half the largest of its column, so that it counts in the reading.',
  caution: 'Loadings of a column sum to zero, because log-ratios are relative.',
};

/** All loadings, to sort and to take away. */
export function LoadingsTablePlate({ run, stale }: Props) {
  const deposit = useDeposit();
  const rows = useMemo((): LoadingRow[] => run.parts.map((part, index) => ({ part, loadings: run.loadings[index] ?? [] })), [run]);
  const columns = useMemo(() => columnsOf(run), [run]);
  return (
    <Plate title="All loadings" stale={stale} help={HELP} exports={tableExports(`${deposit.name}-loadings`, columns, rows)} caption={`${run.parts.length} analytes × ${run.stored} stored components · clr, classical · snapshot ${run.snapshotNumber}`}>
      <Table caption="Loadings of the analytes on the components" columns={columns} rows={rows} rowKey={({ part }) => part} maxHeightRem={24} isDense />
    </Plate>
  );
}

function columnsOf(run: ComponentRun): Column<LoadingRow>[] {
  return [
    { header: 'Analyte', rowHeader: true, widthRem: 5, cell: ({ part }) => part },
    ...Array.from({ length: run.stored }, (_value, index): Column<LoadingRow> => {
      const large = largeFrom(run, index + 1);
      return {
        header: componentName(index + 1),
        unit: formatShare(run.shares[index] ?? NaN),
        align: 'right',
        value: ({ loadings }) => loadings[index] ?? null,
        cell: ({ loadings }) => {
          const value = loadings[index] ?? NaN;
          return <span className={cx(Math.abs(value) >= large ? 'font-semibold text-ink' : 'text-ink-3')}>{formatFixed(value, 2)}</span>;
        },
      };
    }),
  ];
}
