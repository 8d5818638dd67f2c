import { useQuery } from '@tanstack/react-query';
import type { AdminDeposit } from '#contract/admin.ts';
import { Chip } from '#src/components/ui/chip.tsx';
import { Empty } from '#src/components/ui/empty.tsx';
import { Skeleton } from '#src/components/ui/loading.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import type { Column } from '#src/components/ui/table/column.ts';
import { Table } from '#src/components/ui/table/table.tsx';
import { tableExports } from '#src/components/ui/table/table-tools.tsx';
import { countOf, formatBytes } from '#src/lib/format.ts';
import { formatDate } from '#src/lib/format-dates.ts';
import { allDepositsQuery } from '../api/admin-queries.ts';

const COLUMNS: Column<AdminDeposit>[] = [
  {
    header: 'Name',
    rowHeader: true,
    value: ({ name }) => name,
    cell: ({ name, isDemo }) => (
      <span className="flex flex-wrap items-baseline gap-1.5">
        {name}
        {isDemo && <Chip tone="note">demonstration</Chip>}
      </span>
    ),
  },
  { header: 'Leads', cell: ({ leads }) => leads.join(', ') },
  { header: 'Members', align: 'right', cell: ({ members }) => members },
  {
    header: 'Stored',
    align: 'right',
    cell: ({ bytesStored }) => formatBytes(bytesStored),
    value: ({ bytesStored }) => bytesStored,
  },
  {
    header: 'Created',
    isWhole: true,
    cell: ({ createdAt }) => formatDate(createdAt),
    value: ({ createdAt }) => createdAt,
  },
];

/** All deposits by name and size; administration opens no deposit's contents. */
export function AllDepositsPlate() {
  const { data: deposits, error, refetch } = useQuery(allDepositsQuery());
  return (
    <Plate
      title="Deposits"
      qualifier={deposits && countOf(deposits.length, 'deposit')}
      caption="Administration gives no right to read a deposit or to sign in it."
      error={deposits ? undefined : error}
      onRetry={() => void refetch()}
      exports={deposits && tableExports('deposits', COLUMNS, deposits)}
      empty={
        deposits?.length === 0 ? (
          <Empty>No deposit yet. Whoever is signed in can create one.</Empty>
        ) : undefined
      }
    >
      {deposits ? (
        <Table
          caption="All deposits"
          columns={COLUMNS}
          rows={deposits}
          rowKey={({ id }) => id}
          firstSort={{ header: 'Name' }}
          maxHeightRem={24}
        />
      ) : (
        <Skeleton />
      )}
    </Plate>
  );
}
