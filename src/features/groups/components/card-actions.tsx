import { useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import type { Grouping } from '#contract/groupings.ts';
import { columnQuery } from '#src/lib/columns.ts';
import { frameQuery } from '#src/lib/frame.ts';
import { listed } from '#src/lib/number-words.ts';
import { useSelection } from '#src/lib/selection.ts';
import { useDepositId } from '#src/lib/use-deposit.ts';
import { mainGroups } from '../model.ts';
import { DomainLink } from './group-list-plate.tsx';

/** What the groups page can do with a selection: a domain of the groups it mainly lies in. */
export function GroupCardActions({ grouping }: { grouping: Grouping }) {
  const depositId = useDepositId();
  const { rows } = useSelection();
  const { data: label } = useQuery(columnQuery(depositId, grouping.tableId, 'group'));
  const { data: frame } = useQuery(frameQuery(depositId, grouping.frameTableId));
  const labels = useMemo(() => (label && frame ? mainGroups(label, frame.weight, rows) : []), [label, frame, rows]);
  const names = labels.map((own) => grouping.groups.find((group) => group.label === own)?.name ?? `group ${own}`);
  if (labels.length === 0) return null;
  return (
    <>
      <p className="text-caption text-ink-3">A domain takes whole groups: {listed(names)}.</p>
      <DomainLink grouping={grouping} labels={labels} isWide />
    </>
  );
}
