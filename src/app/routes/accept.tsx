import { useQuery } from '@tanstack/react-query';
import { useNavigate, useParams } from 'react-router-dom';
import { getInvitation } from '#contract/auth.ts';
import { LinkButton } from '#src/components/ui/button.tsx';
import { Loading } from '#src/components/ui/loading.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { AcceptForm } from '#src/features/auth/components/accept-form.tsx';
import { Door } from '#src/features/auth/components/door.tsx';
import { call } from '#src/lib/api-client.ts';

export function AcceptPage() {
  const { token = '' } = useParams();
  const navigate = useNavigate();
  const { data: invitation, error } = useQuery({
    queryKey: ['invitations', token],
    queryFn: ({ signal }) => call(getInvitation, { params: { token } }, signal),
    // Once accepted it can no longer be read, and need not be.
    staleTime: Infinity,
  });
  return (
    <Door title={invitation?.depositName ? `Join ${invitation.depositName}` : 'An invitation'}>
      {error && (
        <>
          <Problem error={error} />
          <LinkButton to="/sign-in">Go to sign-in</LinkButton>
        </>
      )}
      {!invitation && !error && <Loading label="Reading the invitation" />}
      {invitation && (
        <AcceptForm
          token={token}
          invitation={invitation}
          onAccepted={(depositId) =>
            void navigate(depositId === null ? '/deposits' : `/deposits/${depositId}`)
          }
        />
      )}
    </Door>
  );
}
