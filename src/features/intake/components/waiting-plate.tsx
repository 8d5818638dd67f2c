import { useQueryClient } from '@tanstack/react-query';
import { useMemo, useState } from 'react';
import { Link } from 'react-router-dom';
import { cancelJob, getJob } from '#contract/jobs.ts';
import { discardUpload, loadFile, type Revision, type Upload } from '#contract/files.ts';
import { Button } from '#src/components/ui/button.tsx';
import { Chip } from '#src/components/ui/chip.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import type { Column } from '#src/components/ui/table/column.ts';
import { Table } from '#src/components/ui/table/table.tsx';
import { call } from '#src/lib/api-client.ts';
import { countOf, formatCount } from '#src/lib/format.ts';
import { formatWhen } from '#src/lib/format-dates.ts';
import { rememberJob } from '#src/lib/jobs.ts';
import { useRefusal } from '#src/lib/use-deposit.ts';
import { refreshTables } from '../api/intake-mutations.ts';
import { openColumns } from '../certainty.ts';
import { KIND_NAMES } from '../kinds.ts';
import { attentionOf, planLoads, type PlannedLoad } from '../load-plan.ts';
import { runLoads, useLoadRun } from '../load-run.ts';
import { isUnderWay } from '../upload-queue.ts';
import { useUploadQueue } from '../use-upload-queue.ts';
import { DiscardDialog } from './discard-dialog.tsx';

interface Props {
  depositId: number;
  uploads: readonly Upload[];
  revisions: readonly Revision[];
}

/** Files brought in and not loaded, in the order they would be. */
export function WaitingPlate({ depositId, uploads, revisions }: Props) {
  const plan = useMemo(() => planLoads(uploads, revisions), [uploads, revisions]);
  const [leaving, setLeaving] = useState<Upload | null>(null);
  const discardRefusal = useRefusal(discardUpload);
  const columns = useMemo(() => columnsFor(depositId, discardRefusal, setLeaving), [depositId, discardRefusal]);
  const isLoading = useLoadRun(depositId)?.isRunning;
  if (plan.length === 0 || isLoading) return null;
  return (
    <Plate
      title="Files waiting"
      qualifier={`${countOf(plan.length, 'file')}, in the order they load`}
      tools={<LoadAll depositId={depositId} plan={plan} />}
      caption="Loading all: the first file of a kind replaces the table in force, later files of the same kind are added to it. Earlier tables stay as revisions. Rows that do not hold are set aside and listed."
    >
      <Table caption="Files waiting to be loaded" columns={columns} rows={plan} rowKey={({ upload }) => upload.id} />
      <DiscardDialog depositId={depositId} upload={leaving} onClose={() => setLeaving(null)} />
    </Plate>
  );
}

function StateChip({ upload }: { upload: Upload }) {
  const attention = attentionOf(upload);
  if (attention) return <Chip tone="warn" title={attention}>{attention}</Chip>;
  if (upload.check) return <Chip tone="good">checked, {formatCount(upload.check.rowsToLoad)} hold</Chip>;
  const open = openColumns(upload).length;
  if (open > 0) return <Chip tone="note">{countOf(open, 'column')} to look at</Chip>;
  return <Chip tone="good">{upload.mappingRemembered ? 'mapped as before' : 'mapped'}</Chip>;
}

function columnsFor(depositId: number, refusal: string | undefined, onDiscard: (upload: Upload) => void): Column<PlannedLoad>[] {
  return [
    {
      header: 'File',
      rowHeader: true,
      isSortable: false,
      cell: ({ upload }) => (
        <>
          <Link to={`/deposits/${depositId}/intake/${upload.id}`} title={upload.fileName} className="inline-block max-w-56 truncate align-bottom font-mono text-caption">{upload.fileName}</Link>
          <span className="block text-caption font-normal whitespace-nowrap text-ink-3">{upload.uploadedBy.name}, {formatWhen(upload.uploadedAt)}</span>
        </>
      ),
      value: ({ upload }) => upload.fileName,
    },
    { header: 'Read as', isSortable: false, cell: ({ upload }) => KIND_NAMES[upload.mapping.kind] },
    { header: 'Rows', align: 'right', isSortable: false, cell: ({ upload }) => formatCount(upload.rowCount), value: ({ upload }) => upload.rowCount },
    { header: 'State', isSortable: false, cell: ({ upload }) => <StateChip upload={upload} /> },
    { header: 'When all load', isSortable: false, cell: ({ effect }) => effect },
    {
      header: 'Discard',
      isControl: true,
      align: 'right',
      cell: ({ upload }) => (
        <Button size="tiny" unavailable={refusal} aria-label={`Discard ${upload.fileName}`} onClick={() => onDiscard(upload)}>
          Discard
        </Button>
      ),
    },
  ];
}

function LoadAll({ depositId, plan }: { depositId: number; plan: readonly PlannedLoad[] }) {
  const queryClient = useQueryClient();
  const refusal = useRefusal(loadFile);
  const isArriving = useUploadQueue(depositId).files.some(isUnderWay) && 'More files are on their way';
  const wanting = plan.filter(({ upload }) => attentionOf(upload) !== null);
  const first = wanting[0]?.upload;
  const attention = first && `${countOf(wanting.length, 'file')} to look at first: ${first.fileName}, ${attentionOf(first) ?? ''}`;
  const load = async () => {
    await runLoads(depositId, plan, {
      start: async (uploadId, mode) => {
        const { job } = await call(loadFile, { params: { depositId, uploadId }, body: { mode } });
        rememberJob(queryClient, job);
        return job;
      },
      read: async (jobId) => {
        const job = await call(getJob, { params: { depositId, jobId } });
        rememberJob(queryClient, job);
        return job;
      },
      cancel: (jobId) => call(cancelJob, { params: { depositId, jobId } }),
      pause: () => new Promise((resolve) => setTimeout(resolve, 500)),
    });
    refreshTables(queryClient, depositId);
  };
  return (
    <Button kind="main" unavailable={refusal ?? (isArriving || attention)} onClick={() => void load()}>
      {plan.length === 1 ? 'Load it as guessed' : `Load all ${formatCount(plan.length)} as guessed`}
    </Button>
  );
}
