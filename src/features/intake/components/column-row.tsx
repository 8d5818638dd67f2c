import { memo } from 'react';
import { ASSAY_UNITS, ROLES_OF_KIND, type AssayUnit, type ColumnMapping, type ColumnRole, type TableKind } from '#contract/files.ts';
import { Chip } from '#src/components/ui/chip.tsx';
import { ErrorLine } from '#src/components/ui/field-frame.tsx';
import { Select, type SelectOption } from '#src/components/ui/select.tsx';
import { cx } from '#src/lib/cx.ts';
import type { Certainty } from '../certainty.ts';
import { ROLE_NAMES, hasAnalytes, unitOfRole } from '../kinds.ts';
import { analyteText, readAnalyteText } from '../mapping.ts';
import { CommitField } from './commit-field.tsx';

export type ColumnEdit = { role: ColumnRole } | Partial<Pick<ColumnMapping, 'analyte' | 'oxide' | 'unit' | 'method'>>;

interface Props extends Pick<Certainty, 'tone' | 'word' | 'reason'> {
  column: ColumnMapping;
  kind: TableKind;
  firstValue: string;
  problem: string | undefined;
  isFixed: boolean;
  /** Lists shared by all rows. */
  analyteListId: string;
  methodListId: string;
  /** The same function for all rows and at every render. */
  onEdit: (index: number, edit: ColumnEdit) => void;
}

const roleOptions = (kind: TableKind, role: ColumnRole): SelectOption<ColumnRole>[] => {
  const roles: ColumnRole[] = ['skip', ...ROLES_OF_KIND[kind]];
  return (roles.includes(role) ? roles : [role, ...roles]).map((value) => ({ value, label: ROLE_NAMES[value] }));
};

const UNIT_OPTIONS: readonly SelectOption<AssayUnit>[] = ASSAY_UNITS.map((value) => ({ value, label: value }));
const NO_UNIT: readonly SelectOption<AssayUnit | ''>[] = [{ value: '', label: 'which?' }, ...UNIT_OPTIONS];

/** One column of the file: its name, what it holds, what it is taken for and how sure that is. */
export const ColumnRow = memo(function ColumnRow(props: Props) {
  const { column, kind, firstValue, tone, word, reason, problem, isFixed, onEdit } = props;
  const { index, header, role } = column;
  const name = header === '' ? `column ${index + 1}` : header;
  const cell = 'border-b border-rule px-1.5 py-[3px] align-middle group-last:border-b-0';
  return (
    <tr className={cx('group', problem && 'bg-bad-wash/50')}>
      <th scope="row" className={cx(cell, 'max-w-40 text-left font-mono text-caption font-semibold break-words', role === 'skip' && 'text-ink-3')}>{name}</th>
      <td className={cx(cell, 'max-w-28 truncate font-mono text-caption text-ink-3')} title={firstValue}>{firstValue === '' ? 'empty' : firstValue}</td>
      <td className={cell}>
        <div className="flex gap-1">
          <Select
            label={`${name} is`}
            isLabelHidden
            controlSize="tiny"
            className={role === 'analyte' ? 'w-[4.75rem]' : 'w-[8.25rem]'}
            options={roleOptions(kind, role)}
            value={role}
            disabled={isFixed}
            onPick={(picked) => onEdit(index, { role: picked })}
          />
          {role === 'analyte' && <AnalyteField {...props} name={name} />}
        </div>
      </td>
      <td className={cell}>{role === 'analyte' ? <UnitField {...props} name={name} /> : <span className="px-1.5 text-ink-3">{unitOfRole(role) ?? '–'}</span>}</td>
      {hasAnalytes(kind) && <td className={cell}>{role === 'analyte' ? <MethodField {...props} name={name} /> : <span className="px-1.5 text-ink-3">–</span>}</td>}
      <td className={cx(cell, 'min-w-28')}>
        {problem ? <ErrorLine message={problem} /> : <Chip tone={tone}>{word}</Chip>}
        {!problem && reason && <span className="block text-caption text-ink-3">{reason}</span>}
      </td>
    </tr>
  );
});

type CellProps = Props & { name: string };

function AnalyteField({ column, name, isFixed, analyteListId, onEdit }: CellProps) {
  return (
    <CommitField
      label={`${name}: analyte`}
      className="w-16"
      value={analyteText(column)}
      list={analyteListId}
      isFixed={isFixed}
      problemOf={(text) => (text === '' || readAnalyteText(text) ? null : 'such as Cu or Al2O3')}
      onCommit={(text) => onEdit(column.index, text === '' ? { analyte: null, oxide: null } : (readAnalyteText(text) ?? {}))}
    />
  );
}

function UnitField({ column, name, isFixed, onEdit }: CellProps) {
  return (
    <Select
      label={`${name}: unit`}
      isLabelHidden
      controlSize="tiny"
      className="w-[4.25rem]"
      options={column.unit === null ? NO_UNIT : UNIT_OPTIONS}
      value={column.unit ?? ''}
      disabled={isFixed}
      onPick={(unit) => unit !== '' && onEdit(column.index, { unit })}
    />
  );
}

function MethodField({ column, name, isFixed, methodListId, onEdit }: CellProps) {
  return (
    <CommitField
      label={`${name}: method`}
      className="w-24"
      value={column.method ?? ''}
      list={methodListId}
      maxLength={80}
      isFixed={isFixed}
      onCommit={(text) => onEdit(column.index, { method: text === '' ? null : text })}
    />
  );
}
