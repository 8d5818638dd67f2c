import { Copy, Download, ShieldCheck } from 'lucide-react';
import { useMemo } from 'react';
import { CODE_COLUMNS, downloadCodes, verifyCodes, type CodeSet } from '#contract/codes.ts';
import { CategoryMark } from '#src/components/charts/category-marks.tsx';
import { Button, DownloadButton } from '#src/components/ui/button.tsx';
import { Chip } from '#src/components/ui/chip.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { ShareBar } from '#src/components/ui/run.tsx';
import type { Column } from '#src/components/ui/table/column.ts';
import { Table } from '#src/components/ui/table/table.tsx';
import { tableExports } from '#src/components/ui/table/table-tools.tsx';
import { endpointUrl } from '#src/lib/api-client.ts';
import { copyText } from '#src/lib/download.ts';
import { formatBytes, formatCount, formatFixed, formatHash, formatMetres, formatShare } from '#src/lib/format.ts';
import { formatInstant } from '#src/lib/format-dates.ts';
import { notify, notifyProblem } from '#src/lib/toasts.ts';
import { useDepositId, useRefusal } from '#src/lib/use-deposit.ts';
import { useVerifyCodes } from '../api/releases-queries.ts';

type CodeRow = CodeSet['byCode'][number];

function columnsFor(metres: number): Column<CodeRow>[] {
  return [
    { header: 'Code', rowHeader: true, isMono: true, value: ({ code }) => code, cell: ({ code, slot }) => <span className="inline-flex items-center gap-1.5">{slot !== null && <CategoryMark slot={slot} size={11} />}{code}</span> },
    { header: 'Domain', value: ({ name }) => name, cell: ({ name }) => name },
    { header: 'Intervals', align: 'right', value: ({ intervals }) => intervals, cell: ({ intervals }) => formatCount(intervals) },
    { header: 'Length', unit: 'm', align: 'right', value: (row) => row.metres, cell: (row) => formatFixed(row.metres, 1) },
    { header: 'Share', align: 'right', value: (row) => (metres > 0 ? row.metres / metres : 0), cell: (row) => formatShare(metres > 0 ? row.metres / metres : 0) },
  ];
}

const HELP = {
  text: 'One line per interval, sorted by hole then depth: its one domain code, group number, membership, elements of deleterious zones, and the snapshot. The SHA-256 covers the whole file.',
  caution: 'Codes support, and do not replace, the judgement of a qualified (competent) person under the reporting code that applies.',
  source: 'SHA-256: FIPS 180-4',
};

const barFill = (slot: number | null): { fill: string } | { look: 'hatch' } => (slot === null ? { look: 'hatch' } : { fill: `var(--c${((slot - 1) % 8) + 1})` });

/** One set of codes: what it holds, its checksum, the file, and making it again. */
export function CodeSetPlate({ set }: { set: CodeSet }) {
  const depositId = useDepositId();
  const columns = useMemo(() => columnsFor(set.metres), [set.metres]);
  const copy = (): void => void copyText(set.sha256).then(() => notify('Checksum copied')).catch(notifyProblem);
  return (
    <Plate
      title={`Codes ${set.number}`}
      qualifier={`${formatInstant(set.createdAt)}, ${set.createdBy.name}`}
      tools={<DownloadButton kind="main" size="tiny" icon={Download} href={endpointUrl(downloadCodes, { params: { depositId, codeSetId: set.id } })}>{`Download ${formatCount(set.rows)} rows`}</DownloadButton>}
      stale={set.isStale && 'tables or domains changed since'}
      help={HELP}
      exports={tableExports(`codes-${set.number}-summary`, columns, set.byCode)}
      caption={`${formatCount(set.rows)} intervals, ${formatMetres(set.metres)} · columns ${CODE_COLUMNS.join(', ')} · snapshot ${set.snapshotNumber}`}
    >
      <ShareBar label="Metres by code" heightPx={18} parts={set.byCode.map(({ code, metres, slot }) => ({ label: code, share: set.metres > 0 ? metres / set.metres : 0, ...barFill(slot) }))} />
      <div className="mt-3"><Table caption={`Codes ${set.number} by domain`} columns={columns} rows={set.byCode} rowKey={({ code }) => code} /></div>
      <div className="mt-3 grid gap-2 rounded-2 bg-trough px-3 py-2">
        <div className="flex flex-wrap items-center gap-x-3 gap-y-1">
          <span className="text-caption font-semibold text-ink-2">SHA-256</span>
          <code className="font-mono text-caption break-all">{set.sha256}</code>
          <Button size="tiny" kind="bare" icon={Copy} onClick={copy}>Copy</Button>
          <span className="text-caption text-ink-2">{formatBytes(set.sizeBytes)}</span>
        </div>
        <VerifyLine set={set} />
      </div>
      {set.notes.map((note) => <p key={note} className="mt-2 text-small text-ink-2">{note}</p>)}
    </Plate>
  );
}

function VerifyLine({ set }: { set: CodeSet }) {
  const verify = useVerifyCodes(useDepositId(), set.id);
  const refusal = useRefusal(verifyCodes);
  return (
    <div className="flex flex-wrap items-center gap-x-3 gap-y-1">
      <Button size="tiny" icon={ShieldCheck} unavailable={refusal} isBusy={verify.isPending} onClick={() => verify.mutate()}>Make it again and compare</Button>
      <span role="status" className="text-small">
        {verify.data && (verify.data.same
          ? <Chip tone="good">same bytes, {formatHash(verify.data.again)}</Chip>
          : <Chip tone="bad">other bytes, {formatHash(verify.data.again)}</Chip>)}
      </span>
      {verify.error && <Problem error={verify.error} />}
    </div>
  );
}
