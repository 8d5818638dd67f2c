import { useMemo, useState } from 'react';
import { changeMemberRole, type Member } from '#contract/deposits.ts';
import { ROLES, type Role } from '#contract/roles.ts';
import { Button } from '#src/components/ui/button.tsx';
import { ConfirmDialog } from '#src/components/ui/dialog.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { Select } from '#src/components/ui/select.tsx';
import type { Column } from '#src/components/ui/table/column.ts';
import { Table } from '#src/components/ui/table/table.tsx';
import { formatDate } from '#src/lib/format-dates.ts';
import { ROLE_NAMES } from '#src/lib/stages.ts';
import { notifyEdit } from '#src/lib/toasts.ts';
import { useMe } from '#src/lib/session.ts';
import { useRefusal } from '#src/lib/use-deposit.ts';
import { useChangeRole, useRemoveMember } from '../api/members-queries.ts';

const ROLE_OPTIONS = ROLES.map((role) => ({ value: role, label: ROLE_NAMES[role] }));

interface Props {
  depositId: number;
  members: readonly Member[];
}

/** Who belongs to the deposit and as what; leads change roles in place. */
export function MemberTable({ depositId, members }: Props) {
  const refusal = useRefusal(changeMemberRole);
  const changing = useChangeRole(depositId);
  const [leaving, setLeaving] = useState<Member | null>(null);
  const columns = useMemo(
    () =>
      columnsFor(refusal === undefined, setLeaving, ({ userId, name, role: before }, role) => {
        const set = (to: Role) => changing.mutateAsync({ userId, role: to });
        void set(role)
          .then(() =>
            notifyEdit({
              label: `${name} is now ${ROLE_NAMES[role].toLowerCase()}`,
              undo: () => set(before),
              redo: () => set(role),
            }),
          )
          .catch(() => undefined);
      }),
    [refusal, changing],
  );
  return (
    <>
      {changing.error && <Problem error={changing.error} className="mb-2" />}
      <Table
        caption="Members of the deposit"
        columns={columns}
        rows={members}
        rowKey={({ userId }) => userId}
        firstSort={{ header: 'Name' }}
      />
      {leaving && (
        <RemoveDialog depositId={depositId} member={leaving} onClose={() => setLeaving(null)} />
      )}
    </>
  );
}

type ChangeRole = (member: Member, role: Role) => void;

function columnsFor(
  mayChange: boolean,
  onRemove: (member: Member) => void,
  onChange: ChangeRole,
): Column<Member>[] {
  const base: Column<Member>[] = [
    {
      header: 'Name',
      rowHeader: true,
      value: ({ name }) => name,
      cell: ({ name, email }) => (
        <>
          {name}
          <span className="block font-normal whitespace-nowrap text-ink-3">{email}</span>
        </>
      ),
    },
    {
      header: 'Role',
      value: ({ role }) => ROLES.indexOf(role),
      cell: (member) =>
        mayChange ? (
          <Select
            label={`Role of ${member.name}`}
            isLabelHidden
            controlSize="tiny"
            className="w-40"
            options={ROLE_OPTIONS}
            value={member.role}
            onPick={(role) => onChange(member, role)}
          />
        ) : (
          ROLE_NAMES[member.role]
        ),
    },
    {
      header: 'Since',
      isWhole: true,
      cell: ({ since }) => formatDate(since),
      value: ({ since }) => since,
    },
  ];
  if (!mayChange) return base;
  const remove: Column<Member> = {
    header: 'Remove',
    isControl: true,
    align: 'right',
    cell: (member) => (
      <Button size="tiny" aria-label={`Remove ${member.name}`} onClick={() => onRemove(member)}>
        Remove
      </Button>
    ),
  };
  return [...base, remove];
}

function RemoveDialog({
  depositId,
  member,
  onClose,
}: {
  depositId: number;
  member: Member;
  onClose: () => void;
}) {
  const removing = useRemoveMember(depositId);
  const isMe = useMe()?.id === member.userId;
  return (
    <ConfirmDialog
      isOpen
      onClose={onClose}
      title={isMe ? 'Leave this deposit?' : `Remove ${member.name}?`}
      description={
        isMe
          ? 'You lose access at once and must be invited to come back.'
          : 'Access ends at once, also of API tokens. What was done stays in the record.'
      }
      confirmLabel={isMe ? 'Leave' : `Remove ${member.name}`}
      isBusy={removing.isPending}
      onConfirm={() => removing.mutate(member.userId, { onSuccess: onClose })}
    >
      {removing.error && <Problem error={removing.error} />}
    </ConfirmDialog>
  );
}
