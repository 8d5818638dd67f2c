import { useMemo } from 'react';
import { Link } from 'react-router-dom';
import { TABLE_KINDS, useRevision as makeCurrent, type Revision, type TableKind } from '#contract/files.ts';
import { Button } from '#src/components/ui/button.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import type { Column } from '#src/components/ui/table/column.ts';
import { Table } from '#src/components/ui/table/table.tsx';
import { tableExports } from '#src/components/ui/table/table-tools.tsx';
import { countOf, formatCount } from '#src/lib/format.ts';
import { formatInstantFully, formatWhen } from '#src/lib/format-dates.ts';
import { notifyEdit } from '#src/lib/toasts.ts';
import { useRefusal } from '#src/lib/use-deposit.ts';
import { useMakeCurrent } from '../api/intake-mutations.ts';
import { KIND_NAMES, KIND_PURPOSE, neededColumns } from '../kinds.ts';
import { revisionInForce } from '../load-plan.ts';

interface TableRow {
  kind: TableKind;
  revision: Revision | undefined;
}

interface Props {
  depositId: number;
  revisions: readonly Revision[];
}

const asideCell = (depositId: number, { rowsAside, uploadId }: Revision) =>
  rowsAside === 0 ? formatCount(0) : <Link to={`/deposits/${depositId}/intake/${uploadId}`}>{formatCount(rowsAside)}</Link>;

const loadedCell = ({ loadedBy, loadedAt }: Revision) => (
  <span className="whitespace-nowrap">
    {loadedBy.name}, <time dateTime={loadedAt} title={formatInstantFully(loadedAt)}>{formatWhen(loadedAt)}</time>
  </span>
);

const fileCell = (depositId: number, { fileName, uploadId, mode }: Revision) => (
  <>
    <Link to={`/deposits/${depositId}/intake/${uploadId}`} title={fileName} className="inline-block max-w-64 truncate align-bottom font-mono text-caption">{fileName}</Link>
    {mode === 'add' && <span className="text-caption whitespace-nowrap text-ink-3"> added to the table before</span>}
  </>
);

const inForceColumns = (depositId: number): Column<TableRow>[] => [
  { header: 'Table', rowHeader: true, isSortable: false, cell: ({ kind }) => <span title={KIND_PURPOSE[kind]}>{KIND_NAMES[kind]}</span>, value: ({ kind }) => KIND_NAMES[kind] },
  { header: 'Revision', align: 'right', isSortable: false, cell: ({ revision }) => revision && formatCount(revision.number), value: ({ revision }) => revision?.number },
  {
    header: 'From file',
    isSortable: false,
    cell: ({ kind, revision }) => (revision ? fileCell(depositId, revision) : <NotLoaded kind={kind} />),
    value: ({ revision }) => revision?.fileName,
  },
  { header: 'Rows', align: 'right', isSortable: false, cell: ({ revision }) => revision && formatCount(revision.rows), value: ({ revision }) => revision?.rows },
  { header: 'Set aside', align: 'right', isSortable: false, cell: ({ revision }) => revision && asideCell(depositId, revision), value: ({ revision }) => revision?.rowsAside },
  { header: 'Loaded', isSortable: false, cell: ({ revision }) => revision && loadedCell(revision), value: ({ revision }) => revision?.loadedAt },
];

/** What a kind is for and what a file of it must hold. */
function NotLoaded({ kind }: { kind: TableKind }) {
  return (
    <span className="block min-w-56 text-ink-3">
      {KIND_PURPOSE[kind]}
      <span className="block text-caption">needs columns for {neededColumns(kind)}</span>
    </span>
  );
}

/** The table of each kind that analyses stand on. */
export function TablesPlate({ depositId, revisions }: Props) {
  const columns = useMemo(() => inForceColumns(depositId), [depositId]);
  const rows = TABLE_KINDS.map((kind) => ({ kind, revision: revisionInForce(revisions, kind) }));
  const loaded = rows.filter(({ revision }) => revision).length;
  return (
    <Plate
      title="Tables in force"
      qualifier={loaded === 0 ? 'none yet; collars come first' : `${formatCount(loaded)} of ${formatCount(rows.length)} kinds`}
      exports={loaded > 0 ? tableExports('tables-in-force', columns, rows) : undefined}
    >
      <Table caption="Tables in force, by kind" columns={columns} rows={rows} rowKey={({ kind }) => kind} />
    </Plate>
  );
}

function historyColumns(depositId: number, refusal: string | undefined, busyId: number | undefined, onUse: (revision: Revision) => void): Column<Revision>[] {
  return [
    { header: 'Table', rowHeader: true, cell: ({ kind }) => KIND_NAMES[kind] },
    { header: 'Revision', align: 'right', cell: ({ number }) => formatCount(number), value: ({ number }) => number },
    { header: 'From file', cell: (revision) => fileCell(depositId, revision), value: ({ fileName }) => fileName },
    { header: 'Rows', align: 'right', cell: ({ rows }) => formatCount(rows), value: ({ rows }) => rows },
    { header: 'Set aside', align: 'right', cell: (revision) => asideCell(depositId, revision), value: ({ rowsAside }) => rowsAside },
    { header: 'Loaded', cell: loadedCell, value: ({ loadedAt }) => loadedAt },
    {
      header: 'Use',
      isControl: true,
      align: 'right',
      cell: (revision) => (
        <Button size="tiny" unavailable={refusal} isBusy={busyId === revision.id} aria-label={`Use this revision, ${revision.number} of ${KIND_NAMES[revision.kind]}`} onClick={() => onUse(revision)}>
          Use this revision
        </Button>
      ),
    },
  ];
}

/** Revisions that have given way; each can be put in force again. */
export function HistoryPlate({ depositId, revisions }: Props) {
  const refusal = useRefusal(makeCurrent);
  const use = useMakeCurrent(depositId);
  const { mutateAsync, variables, isPending } = use;
  const busyId = isPending ? variables : undefined;
  const columns = useMemo(() => {
    const onUse = (revision: Revision) => {
      const before = revisionInForce(revisions, revision.kind);
      const put = (id: number) => async () => void (await mutateAsync(id));
      void mutateAsync(revision.id).then(() => {
        const label = `Revision ${revision.number} of ${KIND_NAMES[revision.kind]} is in force`;
        if (before) notifyEdit({ label, undo: put(before.id), redo: put(revision.id) });
      }, () => undefined);
    };
    return historyColumns(depositId, refusal, busyId, onUse);
  }, [depositId, refusal, busyId, revisions, mutateAsync]);
  const earlier = revisions.filter(({ isCurrent }) => !isCurrent);
  if (earlier.length === 0) return null;
  return (
    <Plate title="Other revisions" qualifier={`${countOf(earlier.length, 'revision')} not in force; each can be used again, and analyses on the others turn stale`}>
      {use.error && <Problem error={use.error} className="mb-2" />}
      <Table caption="Revisions not in force" columns={columns} rows={earlier} rowKey={({ id }) => id} maxHeightRem={20} />
    </Plate>
  );
}
