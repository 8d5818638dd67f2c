import { useQuery } from '@tanstack/react-query';
import { useParams } from 'react-router-dom';
import { Loading } from '#src/components/ui/loading.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { revisionsQuery, uploadQuery } from '#src/features/intake/api/intake-queries.ts';
import { MappingPage } from '#src/features/intake/components/mapping-page.tsx';
import { Absent } from '#src/lib/absent.ts';
import { hasStatus } from '#src/lib/api-problem.ts';
import { useDepositId } from '#src/lib/use-deposit.ts';

export function UploadPage() {
  const depositId = useDepositId();
  const uploadId = Number(useParams()['uploadId']);
  const isNumber = Number.isSafeInteger(uploadId) && uploadId > 0;
  const upload = useQuery({ ...uploadQuery(depositId, uploadId), enabled: isNumber });
  const revisions = useQuery(revisionsQuery(depositId));
  const error = upload.error ?? revisions.error;
  if (!isNumber || hasStatus(upload.error, 404)) throw new Absent();
  if (upload.data && revisions.data)
    return (
      <MappingPage
        key={uploadId}
        depositId={depositId}
        upload={upload.data}
        revisions={revisions.data}
      />
    );
  if (error)
    return (
      <Problem
        error={error}
        action={{
          label: 'Try again',
          run: () => void Promise.all([upload.refetch(), revisions.refetch()]),
        }}
      />
    );
  return <Loading label="Reading the file" />;
}
