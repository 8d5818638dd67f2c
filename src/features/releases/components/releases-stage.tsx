import { useQuery } from '@tanstack/react-query';
import { Stamp } from 'lucide-react';
import { useState } from 'react';
import { makeCodes, type CodeSet } from '#contract/codes.ts';
import { PageHead } from '#src/components/layout/page-head.tsx';
import { PageWait } from '#src/components/layout/page-wait.tsx';
import { Button, LinkButton } from '#src/components/ui/button.tsx';
import { Chip } from '#src/components/ui/chip.tsx';
import { Empty } from '#src/components/ui/empty.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import type { Column } from '#src/components/ui/table/column.ts';
import { Table } from '#src/components/ui/table/table.tsx';
import { domainListQuery } from '#src/lib/analysis-queries.ts';
import { countOf, formatCount, formatHash, formatMetres } from '#src/lib/format.ts';
import { formatInstant } from '#src/lib/format-dates.ts';
import { useJob } from '#src/lib/jobs.ts';
import { notifyProblem } from '#src/lib/toasts.ts';
import { urlMaybeNumber, useUrlState } from '#src/lib/url-state.ts';
import { useDepositId, useRefusal } from '#src/lib/use-deposit.ts';
import { codeSetsQuery, useMakeCodes } from '../api/releases-queries.ts';
import { CodeSetPlate } from './code-set-plate.tsx';
import { RecipePlate } from './recipe-plate.tsx';

const VIEW = { set: urlMaybeNumber() };

const COLUMNS: Column<CodeSet>[] = [
  { header: 'Codes', rowHeader: true, value: ({ number }) => number, cell: ({ number }) => formatCount(number) },
  { header: 'Made', value: ({ createdAt }) => createdAt, cell: ({ createdAt }) => formatInstant(createdAt) },
  { header: 'By', value: ({ createdBy }) => createdBy.name, cell: ({ createdBy }) => createdBy.name },
  { header: 'Rows', align: 'right', value: ({ rows }) => rows, cell: ({ rows }) => formatCount(rows) },
  { header: 'Snapshot', align: 'right', value: ({ snapshotNumber }) => snapshotNumber, cell: ({ snapshotNumber }) => formatCount(snapshotNumber) },
  { header: 'SHA-256', isMono: true, value: ({ sha256 }) => sha256, cell: ({ sha256 }) => formatHash(sha256) },
];

function findingOf(set: CodeSet): string {
  const unassigned = set.byCode.find(({ code }) => code === 'UNASSIGNED')?.intervals ?? 0;
  const rest = unassigned === 0 ? 'none is unassigned' : `${countOf(unassigned, 'interval')} ${unassigned === 1 ? 'is' : 'are'} unassigned`;
  return `Codes ${set.number} give ${countOf(set.rows, 'interval')}, ${formatMetres(set.metres)}, one code each; ${rest}.`;
}

/** Codes for every interval, with their checksum. */
export function ReleasesStage() {
  const depositId = useDepositId();
  const sets = useQuery(codeSetsQuery(depositId));
  const domains = useQuery(domainListQuery(depositId));
  const [view, setView] = useUrlState(VIEW);
  const [jobId, setJobId] = useState<number | null>(null);
  const { job, isRunning } = useJob(depositId, jobId);
  const make = useMakeCodes(depositId);
  const refusal = useRefusal(makeCodes);
  if (!sets.data || !domains.data) return <PageWait title="Releases" reads={[sets, domains]} />;
  const set = sets.data.find(({ id }) => id === view.set) ?? sets.data[0] ?? null;
  const hasDomains = domains.data.domains.length > 0;
  const unavailable = refusal ?? (!hasDomains ? 'Accept a domain first' : domains.data.isStale ? 'The groups are stale: run Groups again first' : isRunning ? 'Codes are being made' : undefined);
  const busy = isRunning ? { progress: job?.progress ?? null, phase: job?.phase ?? 'waiting its turn' } : null;
  const go = (): void => make.mutate(undefined, { onSuccess: (answer) => { setJobId(answer.job.id); setView({ set: null }); }, onError: notifyProblem });
  return (
    <>
      <PageHead
        title="Releases"
        finding={set ? findingOf(set) : undefined}
        chips={set?.isStale && <Chip tone="stale">stale: older than the tables or domains</Chip>}
        actions={<Button kind={set && !set.isStale ? 'plain' : 'main'} icon={Stamp} unavailable={unavailable} isBusy={make.isPending} onClick={go}>{set ? 'Make codes again' : 'Make codes'}</Button>}
      />
      {job?.state === 'failed' && <p role="alert" className="mb-3 rounded-2 bg-bad-wash px-3 py-2 text-bad">{job.error?.message}</p>}
      {!set && <Plate title="Codes" busy={busy} empty={<Empty action={hasDomains ? undefined : <LinkButton to={`/deposits/${depositId}/domains`}>Go to Domains</LinkButton>}>{hasDomains ? 'Domains are accepted. Make codes to give every interval its one code, as a file with a checksum.' : 'Codes are made from candidate domains: accept one first.'}</Empty>} />}
      {set && (
        <div className="grid gap-3 lg:grid-cols-[minmax(0,1.6fr)_minmax(0,1fr)]">
          <CodeSetPlate key={set.id} set={set} />
          <RecipePlate set={set} />
          {sets.data.length > 1 && (
            <Plate title="Earlier codes" qualifier={`${formatCount(sets.data.length)} sets`} className="lg:col-span-2">
              <Table caption="Sets of codes" columns={COLUMNS} rows={sets.data} rowKey={({ id }) => id} onPick={({ id }) => setView({ set: id }, { push: true })} isPicked={({ id }) => id === set.id} />
            </Plate>
          )}
        </div>
      )}
    </>
  );
}
