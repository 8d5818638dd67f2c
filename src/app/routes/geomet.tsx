import { AnalysisTray } from '#src/app/shell/analysis-tray.tsx';
import { GeometStage } from '#src/features/geomet/components/geomet-stage.tsx';

export function GeometPage() {
  return (
    <>
      <GeometStage />
      <AnalysisTray />
    </>
  );
}
