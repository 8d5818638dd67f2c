import { useMemo } from 'react';
import { Link } from 'react-router-dom';
import type { Domain, DomainList } from '#contract/domains.ts';
import type { Grouping } from '#contract/groupings.ts';
import { CategoryMark } from '#src/components/charts/category-marks.tsx';
import { Chip } from '#src/components/ui/chip.tsx';
import { Empty } from '#src/components/ui/empty.tsx';
import { Plate, type PlateBusy } from '#src/components/ui/plate.tsx';
import type { Column } from '#src/components/ui/table/column.ts';
import { Table } from '#src/components/ui/table/table.tsx';
import { tableExports } from '#src/components/ui/table/table-tools.tsx';
import { formatCount, formatFixed, formatShare } from '#src/lib/format.ts';
import { useDepositId } from '#src/lib/use-deposit.ts';

interface Props {
  list: DomainList;
  grouping: Grouping;
  busy: PlateBusy | null;
}

function evidenceChip({ hasEvidence, evidenceIsStale }: Domain) {
  if (!hasEvidence) return <Chip tone="note">not tested</Chip>;
  return evidenceIsStale ? <Chip tone="stale">older than it</Chip> : <Chip tone="good">tested</Chip>;
}

const evidenceWord = ({ hasEvidence, evidenceIsStale }: Domain): string => (!hasEvidence ? 'not tested' : evidenceIsStale ? 'stale' : 'tested');

/** Candidate domains, each leading to its evidence. */
export function DomainTable({ list, grouping, busy }: Props) {
  const depositId = useDepositId();
  const columns = useMemo((): Column<Domain>[] => {
    const namesOf = ({ groupLabels }: Domain): string => groupLabels.map((label) => grouping.groups.find((group) => group.label === label)?.name ?? label).join(', ');
    return [
      {
        header: 'Code', rowHeader: true, isMono: true, isControl: true, value: ({ code }) => code,
        cell: ({ id, code, slot }) => <Link to={`/deposits/${depositId}/domains/${id}`} className="inline-flex items-center gap-1.5 text-copper underline underline-offset-2"><CategoryMark slot={slot} size={11} />{code}</Link>,
      },
      { header: 'Name', value: ({ name }) => name, cell: ({ name }) => name },
      { header: 'Groups', value: namesOf, cell: namesOf },
      { header: 'Intervals', align: 'right', value: ({ intervals }) => intervals, cell: ({ intervals }) => formatCount(intervals) },
      { header: 'Length', unit: 'm', align: 'right', value: ({ metres }) => metres, cell: ({ metres }) => formatFixed(metres, 0) },
      { header: 'Share', align: 'right', value: ({ metres }) => (list.total.metres > 0 ? metres / list.total.metres : 0), cell: ({ metres }) => formatShare(list.total.metres > 0 ? metres / list.total.metres : 0) },
      { header: 'Evidence', value: evidenceWord, cell: evidenceChip },
    ];
  }, [depositId, grouping, list.total.metres]);
  return (
    <Plate title="Candidate domains" qualifier={`on “${grouping.name}”`} busy={busy} exports={tableExports('candidate-domains', columns, list.domains)}>
      <Table caption="Candidate domains" columns={columns} rows={list.domains} rowKey={({ id }) => id} empty={<Empty>Accept one group, or several that are one rock, as a candidate domain. Each interval then carries its code.</Empty>} />
    </Plate>
  );
}
