import { zodResolver } from '@hookform/resolvers/zod';
import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useForm } from 'react-hook-form';
import * as z from 'zod';
import { NewPassword, Password, acceptInvitation, type InvitationView } from '#contract/auth.ts';
import { Name } from '#contract/common.ts';
import { Button } from '#src/components/ui/button.tsx';
import { Field } from '#src/components/ui/field.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { call } from '#src/lib/api-client.ts';
import { fieldWords, showFieldProblems } from '#src/lib/form-problems.ts';
import { enterSession } from '#src/lib/session.ts';
import { ROLE_NAMES } from '#src/lib/stages.ts';
import { NewPasswordField } from './new-password-field.tsx';

const Joining = z.strictObject({ name: Name, password: NewPassword });
const Returning = z.strictObject({ name: z.literal(''), password: Password });
interface Values {
  name: string;
  password: string;
}

interface Props {
  token: string;
  invitation: InvitationView;
  onAccepted: (depositId: number | null) => void;
}

export const invitationSentence = ({ invitedBy, depositName, role }: InvitationView): string =>
  depositName && role
    ? `${invitedBy} asks you to join ${depositName} as ${ROLE_NAMES[role].toLowerCase()}.`
    : `${invitedBy} asks you to join this instance.`;

/** Joins: a newcomer gives a name and a new password, others the password they have. */
export function AcceptForm({ token, invitation, onAccepted }: Props) {
  const queryClient = useQueryClient();
  const { hasAccount, email } = invitation;
  const { register, handleSubmit, formState, setError } = useForm<Values>({
    resolver: zodResolver(hasAccount ? Returning : Joining),
    defaultValues: { name: '', password: '' },
  });
  const accepting = useMutation({
    mutationFn: ({ name, password }: Values) =>
      call(acceptInvitation, {
        params: { token },
        body: hasAccount ? { password } : { name, password },
      }),
    onError: (error) => showFieldProblems(error, ['name', 'password'], setError),
    onSuccess: ({ me, depositId }) => {
      enterSession(queryClient, me);
      onAccepted(depositId);
    },
  });
  return (
    <form
      onSubmit={handleSubmit((values) => accepting.mutate(values))}
      noValidate
      className="grid gap-3.5"
    >
      <p className="font-read text-finding text-ink-2">{invitationSentence(invitation)}</p>
      <Field
        label="E-mail"
        type="email"
        autoComplete="username"
        controlSize="entry"
        value={email}
        readOnly
      />
      {hasAccount ? (
        <Field
          label="Your password"
          type="password"
          autoComplete="current-password"
          controlSize="entry"
          error={fieldWords(formState.errors.password, 'Expected the password of your account')}
          {...register('password')}
        />
      ) : (
        <>
          <Field
            label="Your name"
            autoComplete="name"
            controlSize="entry"
            hint="As colleagues and the record will read it."
            error={fieldWords(formState.errors.name, 'Expected a name')}
            {...register('name')}
          />
          <NewPasswordField
            label="New password"
            controlSize="entry"
            error={formState.errors.password}
            register={register('password')}
          />
        </>
      )}
      {accepting.error && <Problem error={accepting.error} />}
      <Button type="submit" kind="main" size="entry" isWide isBusy={accepting.isPending}>
        {hasAccount ? 'Sign in and join' : 'Join'}
      </Button>
    </form>
  );
}
