import { useQuery } from '@tanstack/react-query';
import { useMemo, useState } from 'react';
import type { AdminUser } from '#contract/admin.ts';
import { Button } from '#src/components/ui/button.tsx';
import { Chip } from '#src/components/ui/chip.tsx';
import { Field } from '#src/components/ui/field.tsx';
import { Skeleton } from '#src/components/ui/loading.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import type { Column } from '#src/components/ui/table/column.ts';
import { Table } from '#src/components/ui/table/table.tsx';
import { tableExports } from '#src/components/ui/table/table-tools.tsx';
import { countOf } from '#src/lib/format.ts';
import { formatWhen } from '#src/lib/format-dates.ts';
import { notify, notifyEdit, notifyProblem } from '#src/lib/toasts.ts';
import { useMe } from '#src/lib/session.ts';
import { useInviteUser, usersQuery, useUpdateUser } from '../api/admin-queries.ts';

type Switch = 'isActive' | 'isAdministrator';

/** Everybody with an account: end or open accounts, give or take administration. */
export function UserPlate() {
  const { data: users, error, refetch } = useQuery(usersQuery());
  const updating = useUpdateUser();
  const me = useMe();
  const columns = useMemo(() => {
    const flip = ({ id, name, ...user }: AdminUser, field: Switch) => {
      const set = (value: boolean) => updating.mutateAsync({ userId: id, [field]: value });
      const next = !user[field];
      void set(next)
        .then(() =>
          notifyEdit({
            label: `${name}: ${WORDS[field][next ? 1 : 0]}`,
            undo: () => set(!next),
            redo: () => set(next),
          }),
        )
        .catch(notifyProblem);
    };
    return userColumns(me?.id ?? 0, flip);
  }, [updating, me?.id]);
  const active = users?.filter(({ isActive }) => isActive).length ?? 0;
  return (
    <Plate
      title="Accounts"
      qualifier={users && `${countOf(active, 'open account')} of ${users.length}`}
      error={users ? undefined : error}
      onRetry={() => void refetch()}
      exports={users && tableExports('accounts', columns, users)}
    >
      {users ? (
        <Table
          caption="Everybody with an account"
          columns={columns}
          rows={users}
          rowKey={({ id }) => id}
          firstSort={{ header: 'Name' }}
          maxHeightRem={28}
        />
      ) : (
        <Skeleton />
      )}
      <InviteUserForm />
    </Plate>
  );
}

const WORDS: Record<Switch, readonly [string, string]> = {
  isActive: ['account ended, sessions closed', 'account open again'],
  isAdministrator: ['no longer administrator', 'now administrator'],
};

const userColumns = (
  myId: number,
  flip: (user: AdminUser, field: Switch) => void,
): Column<AdminUser>[] => [
  {
    header: 'Name',
    rowHeader: true,
    cell: ({ name, email }) => (
      <>
        <span>{name}</span>{' '}
        <span className="block font-normal whitespace-nowrap text-ink-3">{email}</span>
      </>
    ),
    value: ({ name }) => name,
  },
  { header: 'Deposits', align: 'right', cell: ({ deposits }) => deposits },
  {
    header: 'Last seen',
    isWhole: true,
    cell: ({ lastSeenAt }) => (lastSeenAt ? formatWhen(lastSeenAt) : 'never'),
    value: ({ lastSeenAt }) => lastSeenAt,
  },
  {
    header: 'State',
    value: ({ isActive, isAdministrator }) =>
      `${isActive ? 'open' : 'ended'}${isAdministrator ? ', administrator' : ''}`,
    cell: ({ isActive, isAdministrator }) => (
      <span className="flex flex-wrap gap-1">
        <Chip tone={isActive ? 'good' : 'bad'}>{isActive ? 'open' : 'ended'}</Chip>
        {isAdministrator && <Chip tone="note">administrator</Chip>}
      </span>
    ),
  },
  {
    header: 'Change',
    isControl: true,
    align: 'right',
    cell: (user) => {
      const unavailable =
        user.id === myId ? 'Not for your own account: another administrator can' : undefined;
      return (
        <span className="flex flex-wrap justify-end gap-1">
          <Button
            size="tiny"
            unavailable={unavailable}
            aria-label={`${user.isAdministrator ? 'No longer administrator:' : 'Make administrator:'} ${user.name}`}
            onClick={() => flip(user, 'isAdministrator')}
          >
            {user.isAdministrator ? 'No longer administrator' : 'Make administrator'}
          </Button>
          <Button
            size="tiny"
            unavailable={unavailable}
            aria-label={`${user.isActive ? 'End' : 'Open'} account of ${user.name}`}
            onClick={() => flip(user, 'isActive')}
          >
            {user.isActive ? 'End account' : 'Open account'}
          </Button>
        </span>
      );
    },
  },
];

function InviteUserForm() {
  const inviting = useInviteUser();
  const [email, setEmail] = useState('');
  const send = () =>
    inviting.mutate(
      { email },
      {
        onSuccess: () => {
          notify(`Invitation sent to ${email}`);
          setEmail('');
        },
      },
    );
  return (
    <form
      className="mt-2 grid gap-2 border-t border-dotted border-rule pt-2"
      onSubmit={(event) => {
        event.preventDefault();
        send();
      }}
    >
      <div className="flex flex-wrap items-end gap-2">
        <Field
          label="Invite to this instance, by e-mail"
          type="email"
          className="min-w-56 flex-1"
          value={email}
          onChange={(event) => setEmail(event.target.value)}
        />
        <Button
          type="submit"
          isBusy={inviting.isPending}
          unavailable={
            email.includes('@') ? undefined : 'Expected an address such as name@site.example'
          }
        >
          Send the invitation
        </Button>
      </div>
      {inviting.error && <Problem error={inviting.error} />}
    </form>
  );
}
