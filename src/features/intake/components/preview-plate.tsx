import { useQuery } from '@tanstack/react-query';
import { memo, useMemo, type ReactNode } from 'react';
import type * as z from 'zod';
import type { PreviewRow, RowProblem, Upload, previewRows } from '#contract/files.ts';
import { CELL_LOOKS, CellLegend, LookWord, type CellLook } from '#src/components/ui/cell-mark.tsx';
import { Skeleton } from '#src/components/ui/loading.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { cx } from '#src/lib/cx.ts';
import { formatCount } from '#src/lib/format.ts';
import { useSettled } from '#src/lib/use-settled.ts';
import { previewQuery, problemsQuery } from '../api/intake-queries.ts';
import { mappingProblems } from '../mapping.ts';
import type { MappingDraft } from '../use-mapping-draft.ts';

interface Props {
  depositId: number;
  upload: Upload;
  draft: MappingDraft;
  /** Revision of the collars that holes are known by. */
  collarRevision: number | null;
}

const LEGEND = ['below', 'above', 'missing', 'refused', 'warned'] as const;
const EXAMPLES = { below: '<2', above: '>1', missing: 'NS', refused: 'x', warned: '9.4' };

/** The first rows as the mapping reads them, a moment after each change. */
export function PreviewPlate({ depositId, upload, draft, collarRevision }: Props) {
  const { mapping, problems } = draft;
  const settled = useSettled(mapping, 350);
  const isReadable = useMemo(() => mappingProblems(settled).length === 0, [settled]);
  const { data, error, refetch, isFetching } = useQuery({
    ...previewQuery(depositId, upload.id, settled, collarRevision),
    enabled: problems.length === 0 && isReadable,
  });
  const isChecked = upload.check !== null && !draft.isDirty;
  const found = useQuery({ ...problemsQuery(depositId, upload.id, { page: 1 }), enabled: isChecked });
  const preview = useMemo(() => data && withProblems(data, upload, isChecked ? (found.data?.rows ?? []) : []), [data, found.data, isChecked, upload]);
  const last = data?.rows.at(-1)?.row;
  const isPale = problems.length > 0 && data !== undefined;
  return (
    <Plate
      title="Preview"
      qualifier={isPale ? 'as last read: the columns cannot be read yet' : last !== undefined && `rows 2 to ${formatCount(last)} of ${formatCount(upload.rowCount + 1)}`}
      error={data || problems.length > 0 ? undefined : error}
      onRetry={() => void refetch()}
      busy={isFetching && data ? { progress: null, phase: 'reading' } : null}
      className="min-h-0"
      isFlush
    >
      <div className="flex h-full min-h-0 flex-col gap-1.5 px-3 pb-2">
        {preview && (
          <div role="group" aria-label="Preview, scrolls" tabIndex={0} className={cx('scroll-edge relative min-h-0 flex-1 overflow-auto max-lg:max-h-96', isPale && 'opacity-40')}>
            <PreviewTable preview={preview} fileName={upload.fileName} />
          </div>
        )}
        {!data && (problems.length > 0 ? <p className="py-2 text-ink-2">The first rows are shown here once every needed column is named.</p> : <Skeleton lines={8} />)}
        {data && <CellLegend looks={LEGEND} examples={EXAMPLES} />}
      </div>
    </Plate>
  );
}

type Preview = z.infer<typeof previewRows.response>;

/** What shows only once all rows are read (overlaps, repeats, doubtful units) marked in the rows it touches. */
function withProblems(preview: Preview, { mapping }: Upload, problems: readonly RowProblem[]): Preview {
  if (problems.length === 0) return preview;
  const headers = new Map(mapping.columns.map(({ index, header }) => [index, header]));
  return {
    ...preview,
    rows: preview.rows.map((line) => {
      const own = problems.filter(({ row }) => row === line.row);
      if (own.length === 0) return line;
      const cells = line.cells.map((cell, place) => {
        const problem = own.find(({ column }) => column === headers.get(preview.columns[place]?.index ?? -1));
        if (!problem || cell.note !== null) return cell;
        return problem.severity === 'aside' ? { ...cell, mark: 'refused' as const, note: problem.message } : { ...cell, note: problem.message };
      });
      return { ...line, cells, aside: line.aside || own.some(({ severity }) => severity === 'aside') };
    }),
  };
}

const HEAD = 'sticky top-0 z-1 border-b border-rule-firm bg-sheet px-2 py-0.5 align-bottom text-caption font-semibold text-ink-2';

const PreviewTable = memo(function PreviewTable({ preview, fileName }: { preview: Preview; fileName: string }) {
  const { columns, rows } = preview;
  return (
    <table className="border-separate border-spacing-0 text-small">
      <caption className="sr-only">First rows of {fileName}, each cell as it is read</caption>
      <thead>
        <tr>
          <th scope="col" className={cx(HEAD, 'left-0 z-2 text-left')}>row<HeadUnit /></th>
          {columns.map(({ index, label, unit, isNumber }) => (
            <th key={index} scope="col" className={cx(HEAD, isNumber ? 'text-right' : 'text-left')}>
              {label}
              <HeadUnit unit={unit} />
            </th>
          ))}
        </tr>
      </thead>
      <tbody>
        {rows.map((row) => (
          <PreviewLine key={row.row} row={row} columns={columns} />
        ))}
      </tbody>
    </table>
  );
});

function HeadUnit({ unit }: { unit?: string | null }): ReactNode {
  return <span className="block font-normal text-ink-3">{unit ?? '\u00a0'}</span>;
}

function PreviewLine({ row: { row, cells, aside }, columns }: { row: PreviewRow; columns: Preview['columns'] }) {
  return (
    <tr className="hover:bg-trough/45">
      <th scope="row" className={cx('sticky left-0 border-b border-rule bg-sheet px-2 py-0.5 text-left font-mono text-[0.75rem]', aside ? 'font-bold text-bad' : 'font-normal text-ink-3')}>
        {row}
        {aside && <span className="sr-only">, set aside</span>}
      </th>
      {cells.map(({ text, mark, note }, place) => {
        const look: CellLook = mark === 'plain' && note !== null ? 'warned' : mark;
        return (
          <td key={columns[place]?.index ?? place} title={note ?? undefined} className={cx('border-b border-rule px-2 py-0.5 font-mono text-[0.75rem] whitespace-nowrap', columns[place]?.isNumber && 'text-right', CELL_LOOKS[look])}>
            {text}
            <LookWord look={look} />
          </td>
        );
      })}
    </tr>
  );
}
