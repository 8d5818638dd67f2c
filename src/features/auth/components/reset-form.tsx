import { zodResolver } from '@hookform/resolvers/zod';
import { useMutation } from '@tanstack/react-query';
import { useForm } from 'react-hook-form';
import * as z from 'zod';
import { NewPassword, resetPassword } from '#contract/auth.ts';
import { Button, LinkButton } from '#src/components/ui/button.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { call } from '#src/lib/api-client.ts';
import { showFieldProblems } from '#src/lib/form-problems.ts';
import { NewPasswordField } from './new-password-field.tsx';

const Body = z.strictObject({ newPassword: NewPassword });
type Body = z.infer<typeof Body>;

export function ResetForm({ token }: { token: string }) {
  const { register, handleSubmit, formState, setError } = useForm<Body>({
    resolver: zodResolver(Body),
    defaultValues: { newPassword: '' },
  });
  const setting = useMutation({
    mutationFn: (body: Body) => call(resetPassword, { params: { token }, body }),
    onError: (error) => showFieldProblems(error, ['newPassword'], setError),
  });
  if (setting.isSuccess) {
    return (
      <div role="status" className="grid gap-3">
        <p className="font-read text-finding text-ink-2">
          The new password is set, and all open sessions have ended.
        </p>
        <LinkButton to="/sign-in" kind="main" size="entry" isWide>
          Sign in
        </LinkButton>
      </div>
    );
  }
  return (
    <form
      onSubmit={handleSubmit((body) => setting.mutate(body))}
      noValidate
      className="grid gap-3.5"
    >
      <NewPasswordField
        label="New password"
        controlSize="entry"
        error={formState.errors.newPassword}
        register={register('newPassword')}
      />
      {setting.error && <Problem error={setting.error} />}
      <Button type="submit" kind="main" size="entry" isWide isBusy={setting.isPending}>
        Set the password
      </Button>
    </form>
  );
}
