import { Door } from '#src/features/auth/components/door.tsx';
import { ForgottenForm } from '#src/features/auth/components/forgotten-form.tsx';

export function ForgottenPage() {
  return (
    <Door title="Forgotten password">
      <ForgottenForm />
    </Door>
  );
}
