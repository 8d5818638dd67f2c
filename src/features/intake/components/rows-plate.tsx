import { useQuery } from '@tanstack/react-query';
import { Download } from 'lucide-react';
import { useState } from 'react';
import { downloadProblems, type FileCheck, type RowProblem } from '#contract/files.ts';
import { Button, DownloadButton } from '#src/components/ui/button.tsx';
import { Chip } from '#src/components/ui/chip.tsx';
import { Skeleton } from '#src/components/ui/loading.tsx';
import { Plate, type PlateBusy } from '#src/components/ui/plate.tsx';
import type { Column } from '#src/components/ui/table/column.ts';
import { Table } from '#src/components/ui/table/table.tsx';
import { endpointUrl } from '#src/lib/api-client.ts';
import { cx } from '#src/lib/cx.ts';
import { countOf, formatCount } from '#src/lib/format.ts';
import { PROBLEMS_A_PAGE, problemsQuery } from '../api/intake-queries.ts';
import { SEVERITY_TONES, SEVERITY_WORDS, codeWords } from '../problem-words.ts';

interface Props {
  depositId: number;
  uploadId: number;
  check: FileCheck | null;
  /** The check under way. */
  busy: PlateBusy | null;
  /** Why a check failed. */
  error: unknown;
}

const COLUMNS: Column<RowProblem>[] = [
  { header: 'Row', isMono: true, isSortable: false, cell: ({ row }) => formatCount(row), value: ({ row }) => row },
  { header: 'State', isSortable: false, cell: ({ severity }) => <Chip tone={SEVERITY_TONES[severity]}>{SEVERITY_WORDS[severity]}</Chip>, value: ({ severity }) => SEVERITY_WORDS[severity] },
  { header: 'Column', isSortable: false, cell: ({ column }) => column !== '' && <span className="font-semibold">{column}</span>, value: ({ column }) => column },
  { header: 'Value', isSortable: false, cell: ({ value }) => value !== '' && <span className="block max-w-24 truncate font-mono text-caption" title={value}>{value}</span>, value: ({ value }) => value },
  { header: 'Reason', isSortable: false, cell: ({ message }) => message },
];

/** Rows that do not hold or need a look, as the last check or load found them. */
export function RowsPlate({ depositId, uploadId, check, busy, error }: Props) {
  const [only, setOnly] = useState<Only>(null);
  const count = check?.byCode.reduce((sum, entry) => sum + entry.count, 0) ?? 0;
  return (
    <Plate
      title="Rows to look at"
      qualifier={check && `${formatCount(check.rowsAside)} set aside, ${countOf(check.warnings, 'row')} with a warning`}
      tools={count > 0 && <DownloadButton size="tiny" icon={Download} href={endpointUrl(downloadProblems, { params: { depositId, uploadId } })}>CSV</DownloadButton>}
      busy={busy}
      error={error}
      className="min-h-0"
    >
      <div className="flex h-full min-h-0 flex-col gap-1.5">
        {!check && <p className="py-1 text-ink-2">Check every row to see which would be set aside, and why. Checking loads nothing.</p>}
        {check && count === 0 && (
          <>
            <p className="py-1 text-ink-2">Every one of {countOf(check.rows, 'row')} holds; nothing is set aside.</p>
            <Notes notes={check.notes} />
          </>
        )}
        {check && count > 0 && (
          <>
            <CodeFilter byCode={check.byCode} only={only} onPick={setOnly} />
            <ProblemList depositId={depositId} uploadId={uploadId} only={only} notes={check.notes} key={only ? `${only.severity} ${only.code}` : 'all'} />
          </>
        )}
      </div>
    </Plate>
  );
}

type Only = Pick<RowProblem, 'severity' | 'code'> | null;

/** Counts by kind of problem; pressing one lists it alone. */
function CodeFilter({ byCode, only, onPick }: { byCode: FileCheck['byCode']; only: Only; onPick: (only: Only) => void }) {
  const isOnly = (entry: FileCheck['byCode'][number]) => only?.code === entry.code && only.severity === entry.severity;
  return (
    <div role="group" aria-label="Show one kind of problem" className="flex flex-wrap gap-1">
      {byCode.map((entry) => (
        <button
          key={`${entry.severity} ${entry.code}`}
          type="button"
          aria-pressed={isOnly(entry)}
          onClick={() => onPick(isOnly(entry) ? null : { severity: entry.severity, code: entry.code })}
          className={cx('inline-flex h-6 items-center gap-1.5 rounded-2 border px-1.5 text-caption max-md:h-9', isOnly(entry) ? 'border-ink bg-ink text-paper' : 'border-rule-firm bg-sheet text-ink hover:bg-trough')}
        >
          {codeWords(entry.code)}{' '}
          <span className={isOnly(entry) ? '' : entry.severity === 'aside' ? 'text-bad' : 'text-warn'}>{formatCount(entry.count)}</span>
          <span className="sr-only"> {SEVERITY_WORDS[entry.severity]}</span>
        </button>
      ))}
    </div>
  );
}

function Notes({ notes }: { notes: readonly string[] }) {
  if (notes.length === 0) return null;
  return (
    <ul aria-label="Notes of the check" className="m-0 grid list-none gap-0.5 p-0 pt-1 text-caption text-ink-2">
      {notes.map((note) => (
        <li key={note}>{note}</li>
      ))}
    </ul>
  );
}

interface ListProps extends Pick<Props, 'depositId' | 'uploadId'> {
  only: Only;
  notes: readonly string[];
}

function ProblemList({ depositId, uploadId, only, notes }: ListProps) {
  const [page, setPage] = useState(1);
  const { data, error } = useQuery(problemsQuery(depositId, uploadId, { page, ...only }));
  if (!data) return error ? <p role="alert" className="text-bad">The rows could not be read: {error.message}</p> : <Skeleton lines={4} />;
  const pages = Math.max(1, Math.ceil(data.total / PROBLEMS_A_PAGE));
  return (
    <>
      <div role="group" aria-label="Row problems, scrolls" tabIndex={0} className="min-h-0 flex-1 overflow-auto max-lg:max-h-96">
        <Table caption="Row problems" columns={COLUMNS} rows={data.rows} rowKey={(problem, index) => `${problem.row} ${index}`} isDense />
        {only === null && <Notes notes={notes} />}
      </div>
      {pages > 1 && (
        <nav aria-label="Pages of row problems" className="flex items-center justify-end gap-2 text-caption text-ink-2">
          <Button size="tiny" unavailable={page <= 1 && 'This is the first page'} onClick={() => setPage(page - 1)}>Earlier rows</Button>
          page {formatCount(page)} of {formatCount(pages)}
          <Button size="tiny" unavailable={page >= pages && 'This is the last page'} onClick={() => setPage(page + 1)}>Later rows</Button>
        </nav>
      )}
    </>
  );
}
