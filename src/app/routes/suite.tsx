import { SuiteStage } from '#src/features/suites/components/suite-stage.tsx';

export function SuitePage() {
  return <SuiteStage />;
}
