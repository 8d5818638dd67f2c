import { AnalysisTray } from '#src/app/shell/analysis-tray.tsx';
import { DomainsStage } from '#src/features/domains/components/domains-stage.tsx';

export function DomainsPage() {
  return (
    <>
      <DomainsStage />
      <AnalysisTray />
    </>
  );
}
