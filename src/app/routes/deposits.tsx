import { useQuery } from '@tanstack/react-query';
import { Plus } from 'lucide-react';
import { PageHead } from '#src/components/layout/page-head.tsx';
import { LinkButton } from '#src/components/ui/button.tsx';
import { Empty } from '#src/components/ui/empty.tsx';
import { Loading } from '#src/components/ui/loading.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { DepositList } from '#src/features/deposits/components/deposit-list.tsx';
import { depositsQuery } from '#src/lib/deposit-queries.ts';
import { countOf, formatMetres } from '#src/lib/format.ts';

export function DepositsPage() {
  const { data: deposits, error, refetch } = useQuery(depositsQuery());
  const metres = (deposits ?? []).reduce((sum, deposit) => sum + deposit.metres, 0);
  return (
    <>
      <PageHead
        title="Deposits"
        finding={
          deposits &&
          deposits.length > 0 &&
          `${countOf(deposits.length, 'deposit')} you belong to, ${formatMetres(metres)} drilled.`
        }
        actions={
          <LinkButton to="/deposits/new" kind="main" icon={Plus}>
            New deposit
          </LinkButton>
        }
      />
      {error && (
        <Problem error={error} action={{ label: 'Try again', run: () => void refetch() }} />
      )}
      {!deposits && !error && <Loading label="Reading your deposits" />}
      {deposits?.length === 0 && (
        <Empty>
          You belong to no deposit yet. Create one and become its lead, or ask a lead to invite you
          by your e-mail.
        </Empty>
      )}
      {deposits && <DepositList deposits={deposits} />}
    </>
  );
}
