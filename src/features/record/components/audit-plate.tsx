import { useQuery } from '@tanstack/react-query';
import { Download, Search } from 'lucide-react';
import { useState } from 'react';
import { downloadAudit, type AuditEntry } from '#contract/record.ts';
import { Button, DownloadButton } from '#src/components/ui/button.tsx';
import { Empty } from '#src/components/ui/empty.tsx';
import { Field } from '#src/components/ui/field.tsx';
import { Skeleton } from '#src/components/ui/loading.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import type { Column } from '#src/components/ui/table/column.ts';
import { Table } from '#src/components/ui/table/table.tsx';
import { endpointUrl } from '#src/lib/api-client.ts';
import { formatCount, formatHash } from '#src/lib/format.ts';
import { formatInstant, formatInstantFully } from '#src/lib/format-dates.ts';
import { urlNumber, urlText, useUrlState } from '#src/lib/url-state.ts';
import { auditQuery, PAGE_SIZE } from '../api/record-queries.ts';

const VIEW = { text: urlText(), page: urlNumber(1) };

/** The name stands in its own column already. */
const withoutName = (sentence: string, who: string): string => (sentence.startsWith(`${who} `) ? sentence.slice(who.length + 1) : sentence);

/** `zone-rules.changed` as "zone rules changed". */
const inWords = (action: string): string => action.replaceAll(/[.-]/g, ' ');

const COLUMNS: Column<AuditEntry>[] = [
  {
    header: 'When',
    isWhole: true,
    widthRem: 10,
    isSortable: false,
    cell: ({ at }) => (
      <time dateTime={at} title={formatInstantFully(at)}>
        {formatInstant(at)}
      </time>
    ),
    value: ({ at }) => at,
  },
  { header: 'Who', widthRem: 9, isSortable: false, cell: ({ who }) => who, rowHeader: true },
  { header: 'What', isSortable: false, cell: ({ sentence, who }) => withoutName(sentence, who) },
  { header: 'Kind', widthRem: 11, isSortable: false, cell: ({ action }) => inWords(action) },
  {
    header: 'Entry',
    widthRem: 4,
    align: 'right',
    isSortable: false,
    cell: ({ number }) => formatCount(number),
    value: ({ number }) => number,
  },
  {
    header: 'Hash',
    widthRem: 8,
    isSortable: false,
    isMono: true,
    cell: ({ hash }) => <span title={hash}>{formatHash(hash)}</span>,
    value: ({ hash }) => hash,
  },
];

/** The audit record, newest first: searched on the server, paged, taken away as CSV. */
export function AuditPlate({ depositId }: { depositId: number }) {
  const [{ text, page }, setView] = useUrlState(VIEW);
  const [typed, setTyped] = useState(text);
  const { data, error, refetch, isFetching } = useQuery(auditQuery(depositId, text, page));
  const pages = data ? Math.max(1, Math.ceil(data.total / PAGE_SIZE)) : 1;
  return (
    <Plate
      title="What was done"
      qualifier={
        data &&
        `${formatCount(data.total)} ${text ? `entries with “${text}”` : data.total === 1 ? 'entry' : 'entries'}, newest first`
      }
      error={data ? undefined : error}
      onRetry={() => void refetch()}
      busy={isFetching && data ? { progress: null, phase: 'reading' } : null}
      tools={
        <DownloadButton
          href={endpointUrl(downloadAudit, { params: { depositId } })}
          size="tiny"
          icon={Download}
        >
          CSV
        </DownloadButton>
      }
    >
      <form
        role="search"
        className="mb-2 flex max-w-[34rem] items-end gap-2"
        onSubmit={(event) => {
          event.preventDefault();
          setView({ text: typed.trim(), page: 1 }, { push: true });
        }}
      >
        <Field
          label="Find in the record"
          type="search"
          className="flex-1"
          maxLength={120}
          value={typed}
          onChange={(event) => setTyped(event.target.value)}
        />
        <Button type="submit" icon={Search}>
          Find
        </Button>
      </form>
      {!data && !error && <Skeleton lines={6} />}
      {data && (
        <Table
          caption="Audit record"
          columns={COLUMNS}
          rows={data.rows}
          rowKey={({ number }) => number}
          empty={
            <Empty>
              {text
                ? `No entry holds “${text}”.`
                : 'Every change to this deposit is noted here from the first one on.'}
            </Empty>
          }
        />
      )}
      {pages > 1 && (
        <Pager
          page={page}
          pages={pages}
          onPage={(next) => setView({ page: next }, { push: true })}
        />
      )}
    </Plate>
  );
}

function Pager({
  page,
  pages,
  onPage,
}: {
  page: number;
  pages: number;
  onPage: (page: number) => void;
}) {
  return (
    <nav
      aria-label="Pages of the record"
      className="mt-2 flex items-center justify-end gap-2 text-caption text-ink-2"
    >
      <Button
        size="tiny"
        unavailable={page <= 1 && 'This is the newest page'}
        onClick={() => onPage(page - 1)}
      >
        Newer
      </Button>
      page {formatCount(page)} of {formatCount(pages)}
      <Button
        size="tiny"
        unavailable={page >= pages && 'This is the oldest page'}
        onClick={() => onPage(page + 1)}
      >
        Older
      </Button>
    </nav>
  );
}
