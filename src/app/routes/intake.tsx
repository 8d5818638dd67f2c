import { useQuery } from '@tanstack/react-query';
import { PageHead } from '#src/components/layout/page-head.tsx';
import { Loading } from '#src/components/ui/loading.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { revisionsQuery, uploadsQuery } from '#src/features/intake/api/intake-queries.ts';
import { BringPlate } from '#src/features/intake/components/bring-plate.tsx';
import { DemoFilesPlate } from '#src/features/intake/components/demo-files-plate.tsx';
import { JobsPlate } from '#src/features/intake/components/jobs-plate.tsx';
import { LoadRunPlate } from '#src/features/intake/components/load-run-plate.tsx';
import { SnapshotPlate } from '#src/features/intake/components/snapshot-plate.tsx';
import { HistoryPlate, TablesPlate } from '#src/features/intake/components/tables-plate.tsx';
import { WaitingPlate } from '#src/features/intake/components/waiting-plate.tsx';
import { intakeFinding } from '#src/features/intake/finding.ts';
import { snapshotQuery } from '#src/lib/deposit-queries.ts';
import { useDepositId } from '#src/lib/use-deposit.ts';

export function IntakePage() {
  const depositId = useDepositId();
  const uploads = useQuery(uploadsQuery(depositId));
  const revisions = useQuery(revisionsQuery(depositId));
  const snapshot = useQuery(snapshotQuery(depositId));
  const error = uploads.error ?? revisions.error;
  const retry = () => void Promise.all([uploads.refetch(), revisions.refetch()]);
  const isRead = uploads.data !== undefined && revisions.data !== undefined;
  return (
    <>
      <PageHead
        title="Intake"
        finding={isRead && intakeFinding(uploads.data, revisions.data, snapshot.data)}
      />
      {!isRead &&
        (error ? (
          <Problem error={error} action={{ label: 'Try again', run: retry }} />
        ) : (
          <Loading label="Reading the tables" />
        ))}
      {isRead && (
        <div className="grid items-start gap-3 lg:grid-cols-[minmax(0,1fr)_20.375rem]">
          <div className="grid min-w-0 gap-3">
            <BringPlate depositId={depositId} />
            <LoadRunPlate depositId={depositId} />
            <WaitingPlate depositId={depositId} uploads={uploads.data} revisions={revisions.data} />
            <TablesPlate depositId={depositId} revisions={revisions.data} />
            <HistoryPlate depositId={depositId} revisions={revisions.data} />
          </div>
          <div className="grid min-w-0 gap-3">
            <JobsPlate depositId={depositId} />
            <SnapshotPlate
              depositId={depositId}
              answer={snapshot.data}
              error={snapshot.error}
              onRetry={() => void snapshot.refetch()}
            />
            <DemoFilesPlate />
          </div>
        </div>
      )}
    </>
  );
}
