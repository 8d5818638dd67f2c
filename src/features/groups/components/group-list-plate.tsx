import { useQuery } from '@tanstack/react-query';
import type { Grouping } from '#contract/groupings.ts';
import { createDomain } from '#contract/domains.ts';
import { Button, LinkButton } from '#src/components/ui/button.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { tableExports } from '#src/components/ui/table/table-tools.tsx';
import { domainListQuery } from '#src/lib/analysis-queries.ts';
import { countOf } from '#src/lib/format.ts';
import { stagePath } from '#src/lib/stages.ts';
import { useDeposit, useRefusal } from '#src/lib/use-deposit.ts';
import { GroupTable, useGroupColumns } from './group-table.tsx';

interface Props {
  grouping: Grouping;
  ticked: readonly number[];
  onTick: (labels: number[]) => void;
  stale: string | null;
  caption: string;
}

const HELP = {
  text: 'Membership is how much nearer an interval lies to its own group than to the others, mean over the group. Contiguity κ is one less the runs found over the runs expected if the same intervals lay in any order down each hole: 1 is one unbroken run, 0 is chance.',
  caution: 'Assays are alike from one interval to the next whatever the groups, so κ is nearly always over zero: compare groups by it, do not test with it. Name a group only when the rock agrees.',
  source: 'Runs: Mood 1940; expectation within each hole.',
};

/** The groups as a table, with the way to a candidate domain. */
export function GroupListPlate({ grouping, ticked, onTick, stale, caption }: Props) {
  const deposit = useDeposit();
  const columns = useGroupColumns(grouping, ticked, onTick);
  return (
    <Plate
      title="Groups"
      qualifier={grouping.name}
      stale={stale}
      tools={<DomainLink grouping={grouping} labels={ticked} />}
      exports={tableExports(`${deposit.name}-groups`, columns, grouping.groups)}
      help={HELP}
      caption={caption}
      className="mt-3"
    >
      <GroupTable grouping={grouping} ticked={ticked} onTick={onTick} />
    </Plate>
  );
}

/** Takes ticked groups to the domains page. */
export function DomainLink({ grouping, labels, isWide = false }: { grouping: Grouping; labels: readonly number[]; isWide?: boolean }) {
  const deposit = useDeposit();
  const refusal = useRefusal(createDomain);
  const { data: domains } = useQuery(domainListQuery(deposit.id));
  const owner = domains?.domains.find(({ groupLabels }) => groupLabels.some((label) => labels.includes(label)));
  const owned = grouping.groups.find(({ label }) => labels.includes(label) && owner?.groupLabels.includes(label) === true);
  const reason = refusal ?? (owner && owned && grouping.isActive ? `${owned.name} is in ${owner.code} already` : undefined) ?? (grouping.isActive ? (labels.length === 0 ? 'Tick the groups it is made of first' : undefined) : 'Domains stand on another grouping: let them stand on this one first');
  if (reason !== undefined) {
    return (
      <Button size={isWide ? 'normal' : 'tiny'} isWide={isWide} unavailable={reason}>
        Make a candidate domain
      </Button>
    );
  }
  return (
    <LinkButton size={isWide ? 'normal' : 'tiny'} isWide={isWide} to={`${stagePath(deposit.id, 'domains')}?new=1&groups=${labels.join(',')}`}>
      Make a candidate domain{isWide ? '' : ` of ${countOf(labels.length, 'group')}`}
    </LinkButton>
  );
}
