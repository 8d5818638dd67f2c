import { zodResolver } from '@hookform/resolvers/zod';
import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { useForm } from 'react-hook-form';
import { Link } from 'react-router-dom';
import * as z from 'zod';
import { Password, signIn, type Instance, type Me } from '#contract/auth.ts';
import { Email } from '#contract/common.ts';
import { Button } from '#src/components/ui/button.tsx';
import { Field } from '#src/components/ui/field.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { call } from '#src/lib/api-client.ts';
import { fieldWords } from '#src/lib/form-problems.ts';
import { enterSession, instanceQuery } from '#src/lib/session.ts';

const Credentials = z.strictObject({ email: Email, password: Password });
type Credentials = z.input<typeof Credentials>;

/** Signs in and leaves nothing of a person before in the page. */
function useSignIn(onSignedIn: (me: Me) => void) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: Credentials) => call(signIn, { body }),
    onSuccess: (me) => {
      enterSession(queryClient, me);
      onSignedIn(me);
    },
  });
}

export function SignInForm({ onSignedIn }: { onSignedIn: (me: Me) => void }) {
  const signingIn = useSignIn(onSignedIn);
  const { data: instance } = useQuery(instanceQuery());
  const { register, handleSubmit, formState } = useForm<
    Credentials,
    unknown,
    z.output<typeof Credentials>
  >({
    resolver: zodResolver(Credentials),
    defaultValues: { email: '', password: '' },
  });
  return (
    <>
      <form
        onSubmit={handleSubmit((body) => signingIn.mutate(body))}
        noValidate
        className="grid gap-3.5"
      >
        <Field
          label="E-mail"
          type="email"
          autoComplete="username"
          controlSize="entry"
          error={fieldWords(
            formState.errors.email,
            'Expected an address such as name@site.example',
          )}
          {...register('email')}
        />
        <Field
          label="Password"
          type="password"
          autoComplete="current-password"
          controlSize="entry"
          error={fieldWords(formState.errors.password, 'Expected a password')}
          {...register('password')}
        />
        {signingIn.error && <Problem error={signingIn.error} />}
        <Button type="submit" kind="main" size="entry" isWide isBusy={signingIn.isPending}>
          Sign in
        </Button>
      </form>
      <p className="text-caption">
        <Link to="/forgotten" className="inline-block min-h-6 leading-6">
          Forgotten password
        </Link>
      </p>
      {instance && instance.demoSignIns.length > 0 && (
        <DemoSignIns
          people={instance.demoSignIns}
          isBusy={signingIn.isPending}
          onPick={(body) => signingIn.mutate(body)}
        />
      )}
    </>
  );
}

interface DemoProps {
  people: Instance['demoSignIns'];
  isBusy: boolean;
  onPick: (credentials: Credentials) => void;
}

/** A demonstration instance opens its doors: one press signs in as an invented person. */
function DemoSignIns({ people, isBusy, onPick }: DemoProps) {
  return (
    <section aria-labelledby="demo-people" className="border-t border-rule pt-3">
      <h2 id="demo-people" className="text-small font-semibold text-ink-2">
        Look round the demonstration as
      </h2>
      <ul className="m-0 mt-1 grid list-none p-0">
        {people.map(({ email, password, name, role }) => (
          <li key={email}>
            <button
              type="button"
              aria-disabled={isBusy || undefined}
              onClick={() => !isBusy && onPick({ email, password })}
              className="flex min-h-8 w-full items-baseline gap-2 rounded-2 border-0 bg-transparent px-1.5 py-1 text-left text-body hover:bg-trough max-md:min-h-11 max-md:items-center"
            >
              <span className="font-medium text-copper underline">{name}</span>
              <span className="text-caption text-ink-3">{role}</span>
            </button>
          </li>
        ))}
      </ul>
    </section>
  );
}
