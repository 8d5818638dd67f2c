import { zodResolver } from '@hookform/resolvers/zod';
import { Controller, useForm } from 'react-hook-form';
import type * as z from 'zod';
import {
  Invite,
  inviteMember,
  type InviteInput,
  type PendingInvitation,
} from '#contract/deposits.ts';
import { ROLES } from '#contract/roles.ts';
import { Button } from '#src/components/ui/button.tsx';
import { RadioGroup } from '#src/components/ui/choices.tsx';
import { Field } from '#src/components/ui/field.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { fieldWords, showFieldProblems } from '#src/lib/form-problems.ts';
import { formatDate } from '#src/lib/format-dates.ts';
import { ROLE_NAMES, ROLE_RIGHTS } from '#src/lib/stages.ts';
import { notify, notifyProblem } from '#src/lib/toasts.ts';
import { useRefusal } from '#src/lib/use-deposit.ts';
import { useInvite, useWithdrawInvitation } from '../api/members-queries.ts';

const ROLE_CHOICES = ROLES.map((role) => ({
  value: role,
  label: ROLE_NAMES[role],
  hint: ROLE_RIGHTS[role],
}));

/** Invites by e-mail; the link works once, for seven days. */
export function InviteForm({ depositId }: { depositId: number }) {
  const refusal = useRefusal(inviteMember);
  const inviting = useInvite(depositId);
  const { register, control, handleSubmit, formState, reset, setError } = useForm<
    InviteInput,
    unknown,
    z.output<typeof Invite>
  >({
    resolver: zodResolver(Invite),
    defaultValues: { email: '', role: 'geologist' },
  });
  const send = handleSubmit((body) =>
    inviting.mutate(body, {
      onSuccess: () => {
        notify(`Invitation sent to ${body.email}`);
        reset();
      },
      onError: (error) => showFieldProblems(error, ['email', 'role'], setError),
    }),
  );
  return (
    <form onSubmit={send} noValidate className="grid gap-3">
      <Field
        label="E-mail"
        type="email"
        autoComplete="off"
        error={fieldWords(formState.errors.email, 'Expected an address such as name@site.example')}
        {...register('email')}
      />
      <Controller
        control={control}
        name="role"
        render={({ field }) => (
          <RadioGroup
            label="Role"
            choices={ROLE_CHOICES}
            value={field.value}
            onPick={field.onChange}
          />
        )}
      />
      {inviting.error && <Problem error={inviting.error} />}
      <div>
        <Button type="submit" kind="main" unavailable={refusal} isBusy={inviting.isPending}>
          Send the invitation
        </Button>
      </div>
    </form>
  );
}

export function InvitationList({
  depositId,
  invitations,
}: {
  depositId: number;
  invitations: readonly PendingInvitation[];
}) {
  const refusal = useRefusal(inviteMember);
  const withdrawing = useWithdrawInvitation(depositId);
  return (
    <ul className="m-0 list-none p-0">
      {invitations.map(({ id, email, role, invitedBy, expiresAt }) => (
        <li
          key={id}
          className="flex flex-wrap items-baseline gap-x-3 gap-y-1 border-b border-rule py-1.5 text-small last:border-0"
        >
          <span className="min-w-0 font-semibold break-all">{email}</span>
          <span className="text-ink-2">{ROLE_NAMES[role].toLowerCase()}</span>
          <span className="flex-1 text-caption text-ink-3">
            by {invitedBy}, open until {formatDate(expiresAt)}
          </span>
          <Button
            size="tiny"
            aria-label={`Withdraw the invitation of ${email}`}
            unavailable={refusal}
            onClick={() =>
              withdrawing.mutate(id, {
                onSuccess: () => notify(`Invitation of ${email} withdrawn`),
                onError: notifyProblem,
              })
            }
          >
            Withdraw
          </Button>
        </li>
      ))}
    </ul>
  );
}
