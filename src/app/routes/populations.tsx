import { AnalysisTray } from '#src/app/shell/analysis-tray.tsx';
import { PopulationsStage } from '#src/features/populations/components/populations-stage.tsx';

export function PopulationsPage() {
  return (
    <>
      <PopulationsStage />
      <AnalysisTray />
    </>
  );
}
