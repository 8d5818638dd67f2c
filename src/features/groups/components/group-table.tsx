import { useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import type { DomainList } from '#contract/domains.ts';
import { updateGroup, type Group, type Grouping } from '#contract/groupings.ts';
import { RockRun } from '#src/components/ground/rock-run.tsx';
import { assignPatterns, type RockPattern } from '#src/components/charts/rock-patterns.tsx';
import { Checkbox } from '#src/components/ui/choices.tsx';
import { EditableName } from '#src/components/ui/editable-name.tsx';
import type { Column } from '#src/components/ui/table/column.ts';
import { Table } from '#src/components/ui/table/table.tsx';
import { domainListQuery } from '#src/lib/analysis-queries.ts';
import { snapshotQuery } from '#src/lib/deposit-queries.ts';
import { formatCount, formatFixed, formatMetres, formatShare, MISSING } from '#src/lib/format.ts';
import { useDepositId, useRefusal } from '#src/lib/use-deposit.ts';
import { useChangeGroup } from '../api/groups-mutations.ts';
import { scattered } from '../model.ts';
import { SlotPicker } from './slot-picker.tsx';

interface Props {
  grouping: Grouping;
  /** Ticked, to make a domain of. */
  ticked: readonly number[];
  onTick: (labels: number[]) => void;
}

/** The groups one by one: name and colour to change, how sure, how contiguous, in which rock. */
export function GroupTable({ grouping, ticked, onTick }: Props) {
  const columns = useGroupColumns(grouping, ticked, onTick);
  return <Table caption={`Groups of ${grouping.name}`} columns={columns} rows={grouping.groups} rowKey={({ label }) => label} />;
}

export function useGroupColumns(grouping: Grouping, ticked: readonly number[], onTick: (labels: number[]) => void): Column<Group>[] {
  const depositId = useDepositId();
  const { mutate } = useChangeGroup(depositId, grouping.id);
  const refusal = useRefusal(updateGroup);
  const { data: domains } = useQuery(domainListQuery(depositId));
  const { data: snapshot } = useQuery(snapshotQuery(depositId));
  return useMemo(() => {
    const patterns = assignPatterns((snapshot?.snapshot?.lithologies ?? []).map(({ code }) => code));
    const taken = new Map(grouping.groups.map(({ slot, name }) => [slot, name]));
    return [
      tickColumn(ticked, onTick),
      {
        header: 'Group',
        rowHeader: true,
        value: ({ name }) => name,
        cell: (group) => (
          <span className="flex min-w-40 items-center gap-1.5">
            <SlotPicker group={group} taken={withoutOwn(taken, group)} refusal={refusal} onSlot={(slot) => mutate({ label: group.label, change: { slot } })} />
            <EditableName name={group.name} refusal={refusal} onRename={(name) => mutate({ label: group.label, change: { name } })} />
          </span>
        ),
      },
      ...figureColumns(grouping),
      rockColumn(patterns, grouping.support === 'surface' ? 'samples' : 'metres'),
      domainColumn(grouping, domains),
    ];
  }, [grouping, ticked, onTick, refusal, mutate, domains, snapshot]);
}

const withoutOwn = (taken: ReadonlyMap<number, string>, { slot }: Group) => new Map([...taken].filter(([other]) => other !== slot));

const tickColumn = (ticked: readonly number[], onTick: (labels: number[]) => void): Column<Group> => ({
  header: 'Take',
  isControl: true,
  isSortable: false,
  widthRem: 3,
  cell: ({ label, name }) => (
    <Checkbox
      label={`Take ${name} for a domain`}
      isLabelHidden
      checked={ticked.includes(label)}
      onChange={(event) => onTick(event.target.checked ? [...ticked, label].sort((a, b) => a - b) : ticked.filter((other) => other !== label))}
    />
  ),
});

function figureColumns(grouping: Grouping): Column<Group>[] {
  const total = grouping.groups.reduce((sum, { metres }) => sum + metres, 0);
  const isDrill = grouping.support === 'drill';
  const columns: Column<Group>[] = [{ header: isDrill ? 'Intervals' : 'Samples', align: 'right', value: ({ intervals }) => intervals, cell: ({ intervals }) => formatCount(intervals) }];
  if (isDrill) columns.push({ header: 'Metres', unit: 'm', align: 'right', value: ({ metres }) => metres, cell: ({ metres }) => formatCount(metres) });
  columns.push(
    { header: 'Share', align: 'right', value: ({ metres }) => metres / total, cell: ({ metres }) => formatShare(metres / total) },
    { header: 'Membership', align: 'right', value: ({ meanMembership }) => meanMembership, cell: ({ meanMembership }) => formatFixed(meanMembership, 2) },
  );
  if (!isDrill) return columns;
  return [
    ...columns,
    {
      header: 'Contiguity κ',
      align: 'right',
      value: ({ contiguity }) => contiguity?.kappa ?? null,
      cell: (group) => (
        <span title={kappaWords(group)} className={scattered(group) === null ? undefined : 'text-warn'}>
          {group.contiguity?.kappa === null || group.contiguity === null ? MISSING : formatFixed(group.contiguity.kappa, 2)}
        </span>
      ),
    },
    { header: 'Mean run', align: 'right', value: ({ contiguity }) => contiguity?.meanRunM ?? null, cell: ({ contiguity }) => (contiguity === null ? MISSING : formatMetres(contiguity.meanRunM)) },
  ];
}

const kappaWords = ({ contiguity }: Group) => (contiguity === null ? 'No hole: not judged' : `${formatCount(contiguity.runs)} runs, ${formatCount(contiguity.expectedRuns)} expected if the same intervals lay in any order`);

const MOST_ROCKS = 3;

const rockColumn = (patterns: ReadonlyMap<string, RockPattern | null>, unit: string): Column<Group> => ({
  header: 'Logged rock',
  unit: `share of ${unit}`,
  isSortable: false,
  value: ({ lithology }) => lithology.map(({ code, share }) => `${code ?? 'not logged'} ${(share * 100).toFixed(1)} %`).join('; '),
  cell: ({ lithology, name }) => (
    <div className="grid min-w-40 gap-0.5 py-0.5">
      <RockRun label={`Logged rock of ${name}`} parts={lithology} patterns={patterns} />
      <span className="truncate text-caption text-ink-3">{lithology.slice(0, MOST_ROCKS).map(({ code, share }) => `${code ?? 'not logged'} ${formatShare(share)}`).join(', ')}</span>
    </div>
  ),
});

const domainColumn = (grouping: Grouping, list: DomainList | undefined): Column<Group> => ({
  header: 'Domain',
  isMono: true,
  value: ({ label }) => (list?.groupingId === grouping.id ? (list.domains.find(({ groupLabels }) => groupLabels.includes(label))?.code ?? null) : null),
  cell: ({ label }) => (list?.groupingId === grouping.id ? (list.domains.find(({ groupLabels }) => groupLabels.includes(label))?.code ?? MISSING) : MISSING),
});
