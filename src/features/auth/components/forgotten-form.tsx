import { zodResolver } from '@hookform/resolvers/zod';
import { useMutation } from '@tanstack/react-query';
import { useForm } from 'react-hook-form';
import { Link } from 'react-router-dom';
import * as z from 'zod';
import { askPasswordReset } from '#contract/auth.ts';
import { Email } from '#contract/common.ts';
import { Button } from '#src/components/ui/button.tsx';
import { Field } from '#src/components/ui/field.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { call } from '#src/lib/api-client.ts';
import { fieldWords } from '#src/lib/form-problems.ts';

const Body = z.strictObject({ email: Email });

/** Asks for a reset link. The answer never tells whether the address has an account. */
export function ForgottenForm() {
  const asking = useMutation({
    mutationFn: (body: z.input<typeof Body>) => call(askPasswordReset, { body }),
  });
  const { register, handleSubmit, formState } = useForm<
    z.input<typeof Body>,
    unknown,
    z.output<typeof Body>
  >({
    resolver: zodResolver(Body),
    defaultValues: { email: '' },
  });
  if (asking.isSuccess) {
    return (
      <div role="status" className="grid gap-3">
        <p className="font-read text-finding text-ink-2">
          If {asking.variables.email} has an account, a link to set a new password is on its way. It
          works once, for one hour.
        </p>
        <p>
          <Link to="/sign-in">Back to sign-in</Link>
        </p>
      </div>
    );
  }
  return (
    <form
      onSubmit={handleSubmit((body) => asking.mutate(body))}
      noValidate
      className="grid gap-3.5"
    >
      <Field
        label="E-mail"
        type="email"
        autoComplete="username"
        controlSize="entry"
        error={fieldWords(formState.errors.email, 'Expected an address such as name@site.example')}
        {...register('email')}
      />
      {asking.error && <Problem error={asking.error} />}
      <Button type="submit" kind="main" size="entry" isWide isBusy={asking.isPending}>
        Send the link
      </Button>
      <p className="text-caption">
        <Link to="/sign-in" className="inline-block min-h-6 leading-6">
          Back to sign-in
        </Link>
      </p>
    </form>
  );
}
