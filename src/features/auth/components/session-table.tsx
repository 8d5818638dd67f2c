import { useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import type { SessionRow } from '#contract/auth.ts';
import { Button } from '#src/components/ui/button.tsx';
import { Chip } from '#src/components/ui/chip.tsx';
import { Skeleton } from '#src/components/ui/loading.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import type { Column } from '#src/components/ui/table/column.ts';
import { Table } from '#src/components/ui/table/table.tsx';
import { formatInstant } from '#src/lib/format-dates.ts';
import { notify, notifyProblem } from '#src/lib/toasts.ts';
import { sessionsQuery, useEndSession } from '../api/account-queries.ts';
import { deviceWords } from '../device-words.ts';

/** Where this account is signed in; any but this one can be ended here. */
export function SessionTable() {
  const { data: sessions, error, refetch } = useQuery(sessionsQuery());
  const ending = useEndSession();
  const columns = useMemo(
    () =>
      sessionColumns((id) =>
        ending.mutate(id, { onSuccess: () => notify('Session ended'), onError: notifyProblem }),
      ),
    [ending],
  );
  if (error && !sessions)
    return <Problem error={error} action={{ label: 'Try again', run: () => void refetch() }} />;
  if (!sessions) return <Skeleton />;
  return (
    <Table
      caption="Your open sessions"
      columns={columns}
      rows={sessions}
      rowKey={({ id }) => id}
      firstSort={{ header: 'Last seen', isDescending: true }}
    />
  );
}

const sessionColumns = (onEnd: (sessionId: string) => void): Column<SessionRow>[] => [
  {
    header: 'Browser',
    rowHeader: true,
    cell: ({ userAgent }) => <span title={userAgent}>{deviceWords(userAgent)}</span>,
    value: ({ userAgent }) => deviceWords(userAgent),
  },
  { header: 'Address', cell: ({ address }) => address, isMono: true },
  {
    header: 'Since',
    isWhole: true,
    cell: ({ createdAt }) => formatInstant(createdAt),
    value: ({ createdAt }) => createdAt,
  },
  {
    header: 'Last seen',
    isWhole: true,
    cell: ({ lastSeenAt }) => formatInstant(lastSeenAt),
    value: ({ lastSeenAt }) => lastSeenAt,
  },
  {
    header: 'End',
    isControl: true,
    align: 'right',
    cell: ({ id, isThisOne, userAgent }) =>
      isThisOne ? (
        <Chip tone="good">this one</Chip>
      ) : (
        <Button
          size="tiny"
          aria-label={`End the session of ${deviceWords(userAgent)}`}
          onClick={() => onEnd(id)}
        >
          End
        </Button>
      ),
  },
];
