import { TABLE_KINDS, type FileMapping, type Upload } from '#contract/files.ts';
import { Select, type SelectOption } from '#src/components/ui/select.tsx';
import { KIND_NAMES } from '../kinds.ts';
import { withDelimiter, withKind } from '../mapping.ts';

interface Props {
  upload: Upload;
  mapping: FileMapping;
  isFixed: boolean;
  onChange: (mapping: FileMapping) => void;
}

const KIND_OPTIONS = TABLE_KINDS.map((value) => ({ value, label: KIND_NAMES[value] }));
const DELIMITERS: readonly SelectOption<FileMapping['delimiter']>[] = [
  { value: ',', label: 'comma' },
  { value: ';', label: 'semicolon' },
  { value: '\t', label: 'tab' },
  { value: '|', label: 'bar' },
];
const DECIMAL_MARKS: readonly SelectOption<FileMapping['decimalMark']>[] = [
  { value: '.', label: 'point' },
  { value: ',', label: 'comma' },
];
const DOWN: readonly SelectOption<FileMapping['downIs']>[] = [
  { value: 'negative', label: 'negative' },
  { value: 'positive', label: 'positive' },
];
const LINES: readonly SelectOption<FileMapping['referenceLine']>[] = [
  { value: 'bottom', label: 'bottom of core' },
  { value: 'top', label: 'top of core' },
];

export const delimiterName = (delimiter: FileMapping['delimiter']): string => DELIMITERS.find(({ value }) => value === delimiter)?.label ?? '';

/** Separator and decimal mark are asked for only where the file is not plain comma and point. */
function asksForSeparators({ guess, mapping: saved }: Upload, { delimiter, decimalMark, columns }: FileMapping): boolean {
  const isPlain = delimiter === ',' && decimalMark === '.' && saved.delimiter === ',' && saved.decimalMark === '.';
  return !isPlain || columns.length < 2 || guess.length < 2;
}

interface InlineProps<Value extends string> {
  label: string;
  options: readonly SelectOption<Value>[];
  value: Value;
  disabled: boolean;
  onPick: (value: Value) => void;
}

/** A choice within a sentence: its words stand before it. */
function InlineSelect<Value extends string>({ label, ...select }: InlineProps<Value>) {
  return (
    <div className="flex items-center gap-1.5 text-small text-ink-2">
      <span aria-hidden>{label}</span>
      <Select label={label} isLabelHidden controlSize="tiny" className="w-[8.5rem]" {...select} />
    </div>
  );
}

/** How the file as a whole is read: its kind, and what matters for that kind. */
export function ReadingSettings({ upload, mapping, isFixed, onChange }: Props) {
  const { kind, delimiter, decimalMark, downIs, referenceLine, columns } = mapping;
  const has = (...roles: string[]) => columns.some(({ role }) => roles.includes(role));
  const shared = { disabled: isFixed } as const;
  return (
    <div className="flex flex-wrap items-center gap-x-3 gap-y-1.5 pb-1.5">
      <InlineSelect {...shared} label="This file holds" options={KIND_OPTIONS} value={kind} onPick={(picked) => onChange(withKind(mapping, picked, upload.guess))} />
      {asksForSeparators(upload, mapping) && (
        <>
          <InlineSelect {...shared} label="Divided by" options={DELIMITERS} value={delimiter} onPick={(picked) => picked !== delimiter && onChange(withDelimiter(mapping, picked))} />
          <InlineSelect {...shared} label="Decimal mark" options={DECIMAL_MARKS} value={decimalMark} onPick={(picked) => onChange({ ...mapping, decimalMark: picked })} />
        </>
      )}
      {kind === 'survey' && has('dip') && (
        <InlineSelect {...shared} label="A dip that points down is" options={DOWN} value={downIs} onPick={(picked) => onChange({ ...mapping, downIs: picked })} />
      )}
      {kind === 'structure' && has('alpha', 'beta') && (
        <InlineSelect {...shared} label="Beta is read from the" options={LINES} value={referenceLine} onPick={(picked) => onChange({ ...mapping, referenceLine: picked })} />
      )}
    </div>
  );
}
