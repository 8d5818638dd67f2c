import { useQuery } from '@tanstack/react-query';
import { PageHead } from '#src/components/layout/page-head.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { Skeleton } from '#src/components/ui/loading.tsx';
import { membersQuery } from '#src/features/members/api/members-queries.ts';
import { InvitationList, InviteForm } from '#src/features/members/components/invite-form.tsx';
import { MemberTable } from '#src/features/members/components/member-table.tsx';
import { TokenPlate } from '#src/features/members/components/token-plate.tsx';
import { countOf } from '#src/lib/format.ts';
import { useDeposit } from '#src/lib/use-deposit.ts';

export function MembersPage() {
  const deposit = useDeposit();
  const { data, error, refetch } = useQuery(membersQuery(deposit.id));
  const leads = data?.members.filter(({ role }) => role === 'lead') ?? [];
  const finding =
    data &&
    `${countOf(data.members.length, 'person', 'people')} on ${deposit.name}; ${leads.map(({ name }) => name).join(' and ')} ${leads.length === 1 ? 'leads' : 'lead'}.`;
  return (
    <>
      <PageHead title="People and tokens" finding={finding} />
      <div className="grid items-start gap-3 lg:grid-cols-[minmax(0,1fr)_22rem]">
        <div className="grid min-w-0 gap-3">
          <Plate title="Members" error={data ? undefined : error} onRetry={() => void refetch()}>
            {data ? <MemberTable depositId={deposit.id} members={data.members} /> : <Skeleton />}
          </Plate>
          {data && data.invitations.length > 0 && (
            <Plate
              title="Open invitations"
              qualifier={countOf(data.invitations.length, 'invitation')}
            >
              <InvitationList depositId={deposit.id} invitations={data.invitations} />
            </Plate>
          )}
          <TokenPlate depositId={deposit.id} />
        </div>
        <Plate title="Invite a person" qualifier="by e-mail; the link works once, for 7 days">
          <InviteForm depositId={deposit.id} />
        </Plate>
      </div>
    </>
  );
}
