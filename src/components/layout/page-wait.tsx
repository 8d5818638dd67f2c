import { Skeleton } from '#src/components/ui/loading.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { PageHead } from './page-head.tsx';

interface Read {
  data: unknown;
  error: Error | null;
  refetch: () => Promise<unknown>;
}

interface Props {
  title: string;
  /** All that the page stands on. */
  reads: readonly Read[];
}

/** A page that has not read all it stands on: lines in its place, or what failed with the way to try again. */
export function PageWait({ title, reads }: Props) {
  const failed = reads.find(({ data, error }) => data === undefined && error !== null);
  const again = () => void Promise.all(reads.map(({ refetch }) => refetch()));
  return (
    <>
      <PageHead title={title} />
      {failed ? (
        <Problem error={failed.error} action={{ label: 'Try again', run: again }} />
      ) : (
        <Skeleton lines={8} />
      )}
    </>
  );
}
