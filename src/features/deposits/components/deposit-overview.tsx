import { useQuery } from '@tanstack/react-query';
import { ArrowRight, Upload } from 'lucide-react';
import type { ReactNode } from 'react';
import { PageHead } from '#src/components/layout/page-head.tsx';
import { LinkButton } from '#src/components/ui/button.tsx';
import { Chip } from '#src/components/ui/chip.tsx';
import { Loading } from '#src/components/ui/loading.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { overviewQuery } from '#src/lib/deposit-queries.ts';
import { STAGE_NAMES, stagePath } from '#src/lib/stages.ts';
import { useDeposit } from '#src/lib/use-deposit.ts';
import { MetresPlate } from './metres-plate.tsx';
import { GradesPlate, LatelyPlate, WaitingPlate } from './overview-plates.tsx';

/** The deposit at a glance: how far, what waits, what is found. `plan` is the plate with the map. */
export function DepositOverview({ plan }: { plan?: ReactNode }) {
  const deposit = useDeposit();
  const { data: overview, error, refetch } = useQuery(overviewQuery(deposit.id));
  const next = overview?.waiting.find(({ stage }) => stage !== 'deposit');
  const isBare = overview !== undefined && overview.totalMetres <= 0;
  return (
    <>
      <PageHead
        title={deposit.name}
        finding={overview?.finding}
        chips={deposit.isDemo && <Chip tone="note">demonstration, invented data</Chip>}
        actions={
          <>
            <LinkButton
              to={stagePath(deposit.id, 'intake')}
              icon={Upload}
              kind={isBare ? 'main' : 'plain'}
            >
              Bring in files
            </LinkButton>
            {next && !isBare && (
              <LinkButton to={stagePath(deposit.id, next.stage)} kind="main" icon={ArrowRight}>
                Go to {STAGE_NAMES[next.stage]}
              </LinkButton>
            )}
          </>
        }
      />
      {error && !overview && (
        <Problem error={error} action={{ label: 'Try again', run: () => void refetch() }} />
      )}
      {!overview && !error && <Loading label="Reading the overview" />}
      {overview && (
        <div className="grid gap-3 lg:grid-cols-[minmax(0,1fr)_326px] xl:grid-cols-[minmax(0,1fr)_460px]">
          <div className="flex min-w-0 flex-col gap-3">
            <div className="max-md:order-2">
              <MetresPlate overview={overview} />
            </div>
            <div className="grid min-w-0 flex-1 gap-3 max-md:contents lg:grid-cols-[minmax(0,1fr)_minmax(0,1.060fr)]">
              <WaitingPlate
                waiting={overview.waiting}
                depositId={deposit.id}
                className="max-md:order-1"
              />
              <LatelyPlate lately={overview.lately} className="max-md:order-4" />
            </div>
          </div>
          <div className="flex min-w-0 flex-col gap-3">
            {plan}
            <GradesPlate grades={overview.grades} className="flex-1" />
          </div>
        </div>
      )}
    </>
  );
}
