import { useQuery } from '@tanstack/react-query';
import { snapshotQuery } from '#src/lib/deposit-queries.ts';
import { formatInstant } from '#src/lib/format-dates.ts';

/** The state of the data that analyses run on, at the foot of the rail. */
export function SnapshotFoot({ depositId }: { depositId: number }) {
  const { data } = useQuery(snapshotQuery(depositId));
  if (!data) return null;
  const { snapshot, assembling } = data;
  if (!snapshot)
    return <span>{assembling ? 'First snapshot in the making' : 'No snapshot yet'}</span>;
  return (
    <>
      <span>Snapshot {snapshot.number}</span>
      <span>{assembling ? 'a newer one in the making' : formatInstant(snapshot.createdAt)}</span>
    </>
  );
}
