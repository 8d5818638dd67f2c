import { DepositOverview } from '#src/features/deposits/components/deposit-overview.tsx';

export function OverviewPage() {
  return <DepositOverview />;
}
