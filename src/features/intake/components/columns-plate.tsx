import { useCallback, useEffect, useId, useMemo, useRef, useState } from 'react';
import { ASSAY_UNITS, type AssayUnit, type Upload } from '#contract/files.ts';
import { ELEMENT_BY_SYMBOL } from '#kernels/units/atomic-weights.ts';
import { OXIDE_BY_FORMULA } from '#kernels/units/oxides.ts';
import { Button } from '#src/components/ui/button.tsx';
import { ErrorLine } from '#src/components/ui/field-frame.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { Segmented } from '#src/components/ui/segmented.tsx';
import { Select } from '#src/components/ui/select.tsx';
import { countOf, formatCount } from '#src/lib/format.ts';
import { certaintyOf } from '../certainty.ts';
import { hasAnalytes } from '../kinds.ts';
import { columnsWithoutUnit, withColumn, withRole, withUnitForAll } from '../mapping.ts';
import type { MappingDraft } from '../use-mapping-draft.ts';
import { ColumnRow, type ColumnEdit } from './column-row.tsx';
import { ReadingSettings } from './reading-settings.tsx';

interface Props {
  upload: Upload;
  draft: MappingDraft;
  /** Why nothing can be changed; undefined when it can. */
  fixedBecause: string | undefined;
  className?: string;
}

type Shown = 'all' | 'open' | 'skip';
const SHOWN: readonly { value: Shown; label: string }[] = [
  { value: 'all', label: 'All' },
  { value: 'open', label: 'To look at' },
  { value: 'skip', label: 'Not used' },
];
const METHOD = 'Method';
const HEADERS = ['Column', 'First value', 'Is', 'Unit', METHOD, 'How sure'];
const USUAL_METHODS = ['four-acid', 'aqua regia', 'fire assay', 'fusion', 'ore grade', 'combustion', 'X-ray fluorescence'];

/** What each column of the file is: guessed, and confirmed or changed by a person. */
export function ColumnsPlate({ upload, draft, fixedBecause, className }: Props) {
  const { mapping, problems } = draft;
  const [shown, setShown] = useState<Shown>('all');
  const [analyteListId, methodListId] = [useId(), useId()];
  const onEdit = useEdit(upload, draft);
  const isChecked = upload.state !== 'mapped' && !draft.isDirty;
  const rows = useMemo(
    () =>
      mapping.columns.map((column) => ({
        column,
        certainty: certaintyOf(column, mapping.columns, upload, isChecked),
        problem: problems.find(({ index }) => index === column.index)?.message,
        firstValue: upload.guess.find(({ index }) => index === column.index)?.firstValue ?? '',
      })),
    [mapping, problems, upload, isChecked],
  );
  const isOpen = ({ certainty, problem }: (typeof rows)[number]) => certainty.isOpen || problem !== undefined;
  const lacking = problems.filter(({ index }) => index === null).length;
  const open = rows.filter(isOpen).length;
  const seen = rows.filter((row) => shown === 'all' || (shown === 'open' ? isOpen(row) : row.column.role === 'skip'));
  return (
    <Plate
      title="What each column is"
      qualifier={<span aria-live="polite">{countOf(rows.length, 'column')}, {toLookAt(open, lacking)}{savedWord(draft, fixedBecause)}</span>}
      tools={<Segmented label="Columns shown" segments={SHOWN} value={shown} onPick={setShown} />}
      {...(className ? { className } : {})}
    >
      <div className="flex h-full min-h-0 flex-col">
        <ReadingSettings upload={upload} mapping={mapping} isFixed={fixedBecause !== undefined} onChange={draft.change} />
        {fixedBecause && <p className="pb-2 text-caption text-ink-3">{fixedBecause}</p>}
        <FileProblems draft={draft} />
        <UnitsForAll draft={draft} />
        <div role="group" aria-label="Columns, scrolls" tabIndex={0} className="scroll-edge relative min-h-0 flex-1 overflow-auto max-lg:max-h-[32rem]">
          <table className="w-full border-separate border-spacing-0 text-small">
            <caption className="sr-only">Columns of {upload.fileName} and what each is</caption>
            <thead>
              <tr>
                {HEADERS.filter((header) => header !== METHOD || hasAnalytes(mapping.kind)).map((header) => (
                  <th key={header} scope="col" className="sticky top-0 z-1 border-b border-rule-firm bg-sheet px-1.5 py-1 text-left text-caption whitespace-nowrap font-semibold text-ink-2">{header}</th>
                ))}
              </tr>
            </thead>
            <tbody>
              {seen.map((row) => (
                <ColumnRow
                  key={row.column.index}
                  column={row.column}
                  firstValue={row.firstValue}
                  problem={row.problem}
                  tone={row.certainty.tone}
                  word={row.certainty.word}
                  reason={row.certainty.reason}
                  kind={mapping.kind}
                  isFixed={fixedBecause !== undefined}
                  {...{ analyteListId, methodListId, onEdit }}
                />
              ))}
            </tbody>
          </table>
          {seen.length === 0 && <p className="py-2 text-small text-ink-3">{shown === 'open' ? 'No column is left to look at.' : 'Every column is used.'}</p>}
        </div>
      </div>
      <datalist id={analyteListId}>
        {[...ELEMENT_BY_SYMBOL.keys(), ...OXIDE_BY_FORMULA.keys(), 'LOI'].map((symbol) => (
          <option key={symbol} value={symbol} />
        ))}
      </datalist>
      <datalist id={methodListId}>
        {[...new Set([...mapping.columns.flatMap(({ method }) => method ?? []), ...USUAL_METHODS])].map((method) => (
          <option key={method} value={method} />
        ))}
      </datalist>
    </Plate>
  );
}

function toLookAt(open: number, lacking: number): string {
  if (open > 0) return `${formatCount(open)} to look at`;
  return lacking > 0 ? 'a needed one is not named' : 'none to look at';
}

function savedWord({ isDirty, isSaving, problems, error }: MappingDraft, fixedBecause: string | undefined): string {
  if (fixedBecause) return '';
  if (isSaving) return '; saving';
  if (!isDirty) return '; saved';
  return problems.length > 0 || error ? '; kept here, saved once it can be read' : '; not saved yet';
}

/** One function for all rows that always works on the newest mapping. */
function useEdit(upload: Upload, draft: MappingDraft): (index: number, edit: ColumnEdit) => void {
  const latest = useRef({ upload, draft });
  useEffect(() => {
    latest.current = { upload, draft };
  });
  return useCallback((index, edit) => {
    const { upload: file, draft: now } = latest.current;
    if (!('role' in edit)) return now.change(withColumn(now.mapping, index, edit));
    const firstValue = file.guess.find((guess) => guess.index === index)?.firstValue ?? '';
    now.change(withRole(now.mapping, index, edit.role, firstValue));
  }, []);
}

/** What the file as a whole lacks. */
function FileProblems({ draft }: { draft: MappingDraft }) {
  const missing = draft.problems.filter(({ index }) => index === null);
  return (
    <>
      {missing.length > 0 && (
        <div role="status" className="grid gap-0.5 pb-2">
          {missing.map(({ message }) => (
            <ErrorLine key={message} message={message} />
          ))}
        </div>
      )}
      {draft.error !== null && draft.error !== undefined && (
        <Problem error={draft.error} className="mb-2" action={{ label: 'Save again', run: () => void draft.settle().catch(() => undefined) }} />
      )}
    </>
  );
}

/** One unit for all analytes that have none. */
function UnitsForAll({ draft }: { draft: MappingDraft }) {
  const [unit, setUnit] = useState<AssayUnit>('ppm');
  const lacking = columnsWithoutUnit(draft.mapping);
  if (lacking < 2) return null;
  return (
    <div className="mb-2 flex flex-wrap items-center gap-2 rounded-2 bg-warn-wash px-2 py-1 text-small">
      {countOf(lacking, 'analyte')} without a unit: all are in
      <Select label="Unit for all" isLabelHidden controlSize="tiny" className="w-20" options={ASSAY_UNITS.map((value) => ({ value, label: value }))} value={unit} onPick={setUnit} />
      <Button size="tiny" onClick={() => draft.change(withUnitForAll(draft.mapping, unit))}>
        Set {countOf(lacking, 'unit')}
      </Button>
    </div>
  );
}
