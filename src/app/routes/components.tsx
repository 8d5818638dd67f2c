import { ComponentsPage as Page } from '#src/features/components/components/components-page.tsx';
import { useRunInHand } from '#src/features/components/use-run.ts';
import { useLayHole } from '#src/features/tray/use-lay-hole.ts';
import { useDepositId } from '#src/lib/use-deposit.ts';
import { AnalysisTray } from '../shell/analysis-tray.tsx';

export function ComponentsPage() {
  const { run } = useRunInHand(useDepositId());
  const layHole = useLayHole();
  return (
    <>
      <Page onHole={layHole} />
      <AnalysisTray frameTableId={run?.frameTableId} />
    </>
  );
}
