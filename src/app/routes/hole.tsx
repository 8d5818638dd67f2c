import { useQuery } from '@tanstack/react-query';
import { useParams } from 'react-router-dom';
import { PageHead } from '#src/components/layout/page-head.tsx';
import { Loading } from '#src/components/ui/loading.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { HoleSteps } from '#src/features/holes/components/hole-steps.tsx';
import { HoleView } from '#src/features/holes/components/hole-view.tsx';
import { holeFinding } from '#src/features/holes/finding.ts';
import { Absent } from '#src/lib/absent.ts';
import { holeQuery } from '#src/lib/analysis-queries.ts';
import { hasStatus } from '#src/lib/api-problem.ts';
import { holesQuery, snapshotQuery } from '#src/lib/deposit-queries.ts';
import { useDeposit } from '#src/lib/use-deposit.ts';

export function HolePage() {
  const deposit = useDeposit();
  const name = useParams()['hole'] ?? '';
  const { data: hole, error, refetch } = useQuery(holeQuery(deposit.id, name));
  const { data: list } = useQuery(holesQuery(deposit.id));
  const snapshot = useQuery(snapshotQuery(deposit.id)).data?.snapshot ?? null;
  if (hasStatus(error, 404)) throw new Absent();
  return (
    <>
      <PageHead title={name} finding={hole && holeFinding(hole)} actions={list && <HoleSteps depositId={deposit.id} holes={list.holes} hole={name} />} />
      {!hole && (error ? <Problem error={error} action={{ label: 'Try again', run: () => void refetch() }} /> : <Loading label={`Reading ${name}`} />)}
      {hole && <HoleView key={name} deposit={deposit} hole={hole} snapshot={snapshot} />}
    </>
  );
}
