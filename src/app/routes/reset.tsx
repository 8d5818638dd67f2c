import { useParams } from 'react-router-dom';
import { Door } from '#src/features/auth/components/door.tsx';
import { ResetForm } from '#src/features/auth/components/reset-form.tsx';

export function ResetPage() {
  const { token = '' } = useParams();
  return (
    <Door title="Set a new password">
      <ResetForm token={token} />
    </Door>
  );
}
