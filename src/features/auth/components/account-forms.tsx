import { zodResolver } from '@hookform/resolvers/zod';
import { useForm } from 'react-hook-form';
import * as z from 'zod';
import { NewPassword, Password } from '#contract/auth.ts';
import { Name } from '#contract/common.ts';
import { Button } from '#src/components/ui/button.tsx';
import { Field } from '#src/components/ui/field.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { fieldWords, showFieldProblems } from '#src/lib/form-problems.ts';
import { notify } from '#src/lib/toasts.ts';
import { useChangePassword, useUpdateName } from '../api/account-queries.ts';
import { NewPasswordField } from './new-password-field.tsx';

const NameForm = z.strictObject({ name: Name });

export function NameFields({ name, email }: { name: string; email: string }) {
  const updating = useUpdateName();
  const { register, handleSubmit, formState } = useForm<z.infer<typeof NameForm>>({
    resolver: zodResolver(NameForm),
    defaultValues: { name },
  });
  return (
    <form
      onSubmit={handleSubmit((body) =>
        updating.mutate(body, { onSuccess: () => notify('Name saved') }),
      )}
      noValidate
      className="grid gap-3"
    >
      <Field label="E-mail" value={email} readOnly hint="The address you were invited by." />
      <Field
        label="Name"
        autoComplete="name"
        hint="As colleagues and the record read it."
        error={fieldWords(formState.errors.name, 'Expected a name')}
        {...register('name')}
      />
      {updating.error && <Problem error={updating.error} />}
      <div>
        <Button type="submit" isBusy={updating.isPending}>
          Save the name
        </Button>
      </div>
    </form>
  );
}

const PasswordForm = z.strictObject({ currentPassword: Password, newPassword: NewPassword });
type PasswordForm = z.infer<typeof PasswordForm>;

export function PasswordFields() {
  const changing = useChangePassword();
  const { register, handleSubmit, formState, reset, setError } = useForm<PasswordForm>({
    resolver: zodResolver(PasswordForm),
    defaultValues: { currentPassword: '', newPassword: '' },
  });
  const send = handleSubmit((body) =>
    changing.mutate(body, {
      onSuccess: () => {
        notify('Password changed; your other sessions have ended');
        reset();
      },
      onError: (error) => showFieldProblems(error, ['currentPassword', 'newPassword'], setError),
    }),
  );
  return (
    <form onSubmit={send} noValidate className="grid gap-3">
      <Field
        label="Present password"
        type="password"
        autoComplete="current-password"
        error={fieldWords(formState.errors.currentPassword, 'Expected your present password')}
        {...register('currentPassword')}
      />
      <NewPasswordField
        label="New password"
        error={formState.errors.newPassword}
        register={register('newPassword')}
      />
      {changing.error && <Problem error={changing.error} />}
      <div>
        <Button type="submit" isBusy={changing.isPending}>
          Change the password
        </Button>
      </div>
    </form>
  );
}
