import { Suspense, lazy } from 'react';
import { Skeleton } from '#src/components/ui/loading.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { DepositOverview } from '#src/features/deposits/components/deposit-overview.tsx';

/** The plan brings the drawing library along: the page is there before it. */
const PlanPlate = lazy(async () => ({
  default: (await import('#src/features/deposits/components/plan-plate.tsx')).PlanPlate,
}));

export function OverviewPage() {
  const waiting = (
    <Plate title="Plan">
      <Skeleton lines={8} />
    </Plate>
  );
  return (
    <DepositOverview
      plan={
        <Suspense fallback={waiting}>
          <PlanPlate />
        </Suspense>
      }
    />
  );
}
