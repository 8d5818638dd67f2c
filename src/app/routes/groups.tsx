import { GroupCardActions } from '#src/features/groups/components/card-actions.tsx';
import { GroupsPage as Page } from '#src/features/groups/components/groups-page.tsx';
import { useGroupingInHand } from '#src/features/groups/use-grouping.ts';
import { useLayHole } from '#src/features/tray/use-lay-hole.ts';
import { useDepositId } from '#src/lib/use-deposit.ts';
import { AnalysisTray } from '../shell/analysis-tray.tsx';

export function GroupsPage() {
  const { grouping } = useGroupingInHand(useDepositId());
  const layHole = useLayHole();
  return (
    <>
      <Page onHole={layHole} />
      <AnalysisTray grouping={grouping ?? undefined} cardActions={grouping === null ? undefined : <GroupCardActions grouping={grouping} />} />
    </>
  );
}
