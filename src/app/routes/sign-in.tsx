import { useNavigate, useSearchParams } from 'react-router-dom';
import { Door } from '#src/features/auth/components/door.tsx';
import { SignInForm } from '#src/features/auth/components/sign-in-form.tsx';
import { safeReturn } from '../safe-return.ts';

export function SignInPage() {
  const [search] = useSearchParams();
  const navigate = useNavigate();
  return (
    <Door title="Find the edge of the ore, and show how you know.">
      <SignInForm
        onSignedIn={() => void navigate(safeReturn(search.get('to')), { replace: true })}
      />
    </Door>
  );
}
